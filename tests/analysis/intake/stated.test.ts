import { describe, expect, test } from 'vitest';
import { applyStated } from '../../../analysis/intake/apply-stated';
import { readTrajectories } from '../../../analysis/intake/read-trajectories';
import { takeIn } from '../../../analysis/intake/take-in';
import type { ReadingSpec } from '../../../analysis/intake/types';
import { readingHash } from '../../../db/integrity/addresses';
import { bytesOf, inspect, read, tryRead, values } from './files';

/** What a person states on top of what the file says. */
const FRAMES = 'track,frame,x (px),y (px)\n1,0,10,20\n1,1,11,22\n1,3,12,21\n';
const TIMED = 'track,t (s),x (µm),y (µm)\n1,0,1,2\n1,0.5,2,3\n1,1,3,1\n';

describe('what a file does not say', () => {
  test('frames become seconds and pixels micrometres', () => {
    const outcome = read(FRAMES, { frameInterval: '0.04', pixelSize: '0.5' });
    expect(values(outcome)).toEqual({
      tracks: ['1', '1', '1'],
      time: null,
      frame: [0, 1, 3],
      axes: [
        [5, 5.5, 6],
        [10, 11, 10.5],
      ],
    });
    expect(outcome.trajectories).toMatchObject({ frameInterval: 0.04, pixelSize: 0.5 });
    expect(outcome.summary).toMatchObject({ frameInterval: 0.04, gaps: 1, missingFrames: 1 });
  });

  test('until it is stated nothing is read, and what is asked for is named', () => {
    const { inspection, read: outcome } = takeIn(bytesOf(FRAMES), 'a.csv', { pixelSize: '0.5' });
    expect(outcome).toBeNull();
    expect(inspection).toMatchObject({ failed: false, required: ['frameInterval'] });
  });

  test('exposure, in seconds or as a part of the interval', () => {
    expect(read(TIMED, { exposure: { seconds: '0.02' } }).trajectories.exposure).toEqual({ seconds: 0.02 });
    expect(read(TIMED, { exposure: { fraction: '0.4' } }).trajectories.exposure).toEqual({ fraction: 0.4 });
    expect(read(TIMED).trajectories.exposure).toBeNull();
  });
});

describe('what a file does say', () => {
  test('a unit in the header wins over a stated pixel size, and a note says so', () => {
    const stated = applyStated(inspect(TIMED), { pixelSize: '0.1' });
    expect(stated.spec.pixelSize).toBeNull();
    expect(stated.notes.join(' ')).toMatch(/pixel size/);
    expect(values(read(TIMED, { pixelSize: '0.1' })).axes[0]).toEqual([1, 2, 3]);
  });

  test('an interval that contradicts the times is refused with both numbers; a rounded one is not', () => {
    const refused = tryRead(TIMED, { frameInterval: '0.4' });
    expect(refused).toMatchObject({ failed: true, code: 'frame-interval-contradicts' });
    expect(refused.failed && refused.message).toMatch(/0\.5 s apart.*0\.4 s/);
    expect(read(TIMED, { frameInterval: '0.501' }).summary.frameInterval).toBe(0.5);
  });
});

describe('a reading that cannot be', () => {
  const change = (more: (spec: ReadingSpec) => Partial<ReadingSpec>) =>
    tryRead(TIMED, {}, (spec) => ({ ...spec, ...more(spec) }));

  test.each([
    ['a column twice', (s: ReadingSpec) => ({ columns: { ...s.columns, y: s.columns.x } }), /two things/],
    [
      'a column that is not there',
      (s: ReadingSpec) => ({ columns: { ...s.columns, y: 17 } }),
      /Column 18 .* 4 columns/,
    ],
    [
      'time and frame',
      (s: ReadingSpec) => ({ columns: { ...s.columns, frame: 0, track: null } }),
      /not both/,
    ],
    [
      'pixels without a size',
      (s: ReadingSpec) => ({ units: { ...s.units, x: 'px' as const } }),
      /how many micrometres/,
    ],
    ['a size of zero', () => ({ pixelSize: '0' }), /above zero/],
    ['an exposure beyond the frame', () => ({ exposure: { fraction: '1.5' } }), /0 to 1/],
    [
      'a comma for two things',
      (s: ReadingSpec) => ({ dialect: { ...s.dialect, decimal: ',' as const } }),
      /both/,
    ],
    ['a parser of another time', () => ({ parser: 'motebook-intake/0' }), /Confirm the file again/],
  ])('%s', (_, more, reason) => {
    const outcome = change(more);
    expect(outcome.failed && outcome.message).toMatch(reason);
  });

  test('columns in which no row can be read: the first reason is told', () => {
    const words = 'track,t,x,y,name\n1,0,1,2,a\n1,1,2,3,b\n';
    const outcome = tryRead(words, {}, (spec) => ({ ...spec, columns: { ...spec.columns, x: 4 } }));
    // A row without a readable position keeps its place, so that the gap is known of.
    if (outcome.failed) expect(outcome.message).toContain('line 2');
    else
      expect(outcome.problems.map(({ reason }) => reason)).toEqual([
        'x "a" is not a number',
        'x "b" is not a number',
      ]);
  });
});

test('the same bytes and the same reading are the same thing, and any other setting is another', () => {
  const { spec } = inspect(TIMED);
  const file = 'f'.repeat(64);
  const hash = readingHash(file, spec);
  expect(readingHash(file, structuredClone(spec))).toBe(hash);
  expect(readingHash('e'.repeat(64), spec)).not.toBe(hash);
  expect(readingHash(file, { ...spec, exposure: { fraction: '1' } })).not.toBe(hash);
  expect(readTrajectories(bytesOf(TIMED), spec)).toEqual(readTrajectories(bytesOf(TIMED), spec));
});
