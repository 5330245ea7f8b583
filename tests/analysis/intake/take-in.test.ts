import { describe, expect, test } from 'vitest';
import { applyStated, type Stated } from '../../../analysis/intake/apply-stated';
import { describeReading } from '../../../analysis/intake/describe';
import { takeIn } from '../../../analysis/intake/take-in';
import type { Inspection, ReadingSpec } from '../../../analysis/intake/types';
import { handle } from '../../../analysis/worker/handle';
import { bytesOf, inspect, read, tryRead, values } from './files';

/** A file with all that can be in one: frames, two clocks, positions in two units, one in a unit that is not converted. */
const RICH =
  'track,frame,t (s),lag (ms),day (days),x (px),y (px),u (nm),v (nm),w (cm)\n' +
  [0, 1, 2, 3]
    .map((i) => `1,${i},${i * 0.5},${i * 500},${i},${i + 1},${i * 2},${i * 100},${i * 50},1`)
    .join('\n');
const FRAMES = 'track,frame,x,y\n1,0,10,20\n1,1,11,22\n1,3,12,21\n';
const TIMED = 'track,t (s),x (µm),y (µm)\n1,0,1,2\n1,0.5,2,3\n1,1,3,1\n';

const state = (text: string, stated: Stated): Inspection => applyStated(inspect(text), stated);

describe('columns chosen by hand', () => {
  test('a frame instead of the time, and back: each gives up the other', () => {
    const framed = state(RICH, { columns: { frame: 1 } });
    expect(framed.spec.columns).toMatchObject({ time: null, frame: 1 });
    expect(framed.spec.units.time).toBeNull();
    expect(framed.required).toContain('frameInterval');
    const timed = state(FRAMES, { columns: { time: 1 } });
    expect(timed.spec.columns).toMatchObject({ time: 1, frame: null });
    expect(timed.spec.units.time).toBe('s');
    expect(timed.required).toEqual([]);
  });

  test('another time column has the unit of its own header', () => {
    expect(state(RICH, { columns: { time: 3 } }).spec.units.time).toBe('ms');
    const outcome = read(RICH, { columns: { time: 3 }, pixelSize: '0.1' });
    expect(values(outcome).time).toEqual([0, 0.5, 1, 1.5]);
  });

  test('other positions have the unit of their own header, and a chosen z that of its', () => {
    const { spec, required } = state(RICH, { columns: { x: 7, y: 8 } });
    expect(spec.units).toMatchObject({ x: 'nm', y: 'nm' });
    expect(required).toEqual([]);
    expect(state(RICH, { columns: { z: 7 } }).spec.units).toEqual({ time: 's', x: 'px', y: 'px', z: 'nm' });
    expect(values(read(RICH, { columns: { x: 7, y: 8 } })).axes).toEqual([
      [0, 0.1, 0.2, 0.3],
      [0, 0.05, 0.1, 0.15],
    ]);
  });

  test('a chosen column in a unit that cannot be converted is asked for, until its unit is stated', () => {
    expect(state(RICH, { columns: { x: 9, y: null } }).required).toEqual(['lengthUnit']);
    expect(state(RICH, { columns: { x: 9, y: null }, units: { x: 'mm' } }).required).toEqual([]);
    expect(state(RICH, { columns: { time: 4 }, pixelSize: '1' }).required).toEqual(['timeUnit']);
    expect(state(RICH, { columns: { time: 4 }, units: { time: 'h' }, pixelSize: '1' }).required).toEqual([]);
    expect(takeIn(bytesOf(RICH), 'a.csv', { columns: { x: 9 }, pixelSize: '1' }).read).toBeNull();
  });

  test('an axis less, a track less', () => {
    const { spec } = state(TIMED, { columns: { y: null, track: null } });
    expect(spec.columns).toMatchObject({ x: 2, y: null, track: null });
    expect(spec.units.y).toBeNull();
    expect(read(TIMED, { columns: { y: null } }).summary.dims).toBe(1);
  });

  test('what is written out as undefined stays as guessed', () => {
    const guessed = inspect(TIMED);
    const same = applyStated(guessed, {
      columns: { x: undefined, time: undefined },
      units: { x: undefined },
      frameInterval: undefined,
      pixelSize: null,
      exposure: null,
    });
    expect(same).toEqual(guessed);
  });
});

describe('units and sizes', () => {
  test('a unit chosen by hand wins over the header, and over a pixel size', () => {
    const nm = state(TIMED, { units: { x: 'nm', y: 'nm', time: 'ms' } });
    expect(nm.spec.units).toEqual({ time: 'ms', x: 'nm', y: 'nm', z: null });
    const both = state(FRAMES, { units: { x: 'nm', y: 'nm' }, pixelSize: '0.1', frameInterval: '1' });
    expect(both.spec).toMatchObject({ units: { x: 'nm', y: 'nm' }, pixelSize: null });
    expect(both.notes.join(' ')).toContain('the pixel size was not used');
  });

  test('positions without a unit are pixels when the size of one is stated', () => {
    const stated = state(FRAMES, { pixelSize: '0.107', frameInterval: '0.04' });
    expect(stated.spec).toMatchObject({ units: { x: 'px', y: 'px' }, pixelSize: '0.107' });
    expect(stated.assumed).toEqual(['exposure']);
    expect(stated.notes.join(' ')).not.toContain('taken as micrometres');
    const { axes } = values(read(FRAMES, { pixelSize: '0.107', frameInterval: '0.04' }));
    // One rounding: the product of the two numbers as they stand in the texts.
    expect(axes[0]).toEqual([10 * 0.107, 11 * 0.107, 12 * 0.107]);
  });

  test('beside an axis with a unit an axis without one is not a pixel', () => {
    const one = 'track,t,x,y (µm)\n1,0,1,2\n1,1,2,3\n1,2,3,1\n';
    expect(state(one, { pixelSize: '0.1' }).spec).toMatchObject({
      units: { x: 'um', y: 'um' },
      pixelSize: null,
    });
  });

  test('a pixel size does not settle a unit that cannot be converted', () => {
    const inches = 'track,t (s),x (in),y (in)\n1,0,1,2\n1,1,2,3\n1,2,3,1\n';
    expect(state(inches, { pixelSize: '0.1' }).required).toEqual(['lengthUnit']);
  });

  test('the exposure that is stated is no longer said to be missing', () => {
    expect(state(TIMED, {}).assumed).toEqual(['exposure']);
    expect(state(TIMED, { exposure: { fraction: '0' } }).assumed).toEqual([]);
  });
});

describe('a stated interval beside times', () => {
  test.each([
    ['0.5', true],
    ['0.4951', true],
    ['0.5049', true],
    ['0.494', false],
    ['0.506', false],
    ['0.25', false],
    ['1', false],
    ['500', false],
  ])('%s s agrees with times 0.5 s apart: %s', (frameInterval, agrees) => {
    const outcome = tryRead(TIMED, { frameInterval });
    expect(outcome.failed).toBe(!agrees);
    if (outcome.failed) {
      expect(outcome.code).toBe('frame-interval-contradicts');
      expect(outcome.message).toContain(`0.5 s apart, but the stated frame interval is ${frameInterval} s`);
    } else expect(outcome.summary.frameInterval).toBe(0.5);
  });

  test('it is compared in seconds, also where the file has milliseconds', () => {
    const ms = TIMED.replace('t (s)', 't (ms)').replace('0.5', '500').replace('1,1,3', '1,1000,3');
    expect(read(ms, { frameInterval: '0.5' }).summary.frameInterval).toBe(0.5);
    expect(tryRead(ms, { frameInterval: '500' }).failed).toBe(true);
  });

  test('missing frames do not make it wrong, and a single row has nothing to contradict', () => {
    const gaps = 'track,t (s),x (µm),y (µm)\n1,0,1,2\n1,0.5,2,3\n1,1.5,3,1\n1,2,3,1\n1,4,3,1\n1,4.5,2,1\n';
    expect(read(gaps, { frameInterval: '0.5' }).summary).toMatchObject({ gaps: 2, missingFrames: 4 });
    expect(tryRead('track,t (s),x (µm),y (µm)\n1,0,1,2\n', { frameInterval: '7' }).failed).toBe(false);
  });
});

describe('a reading that a person has settled', () => {
  const guessed = inspect(TIMED).spec;

  test('replaces what was guessed and stated, and what is missing is asked for again', () => {
    const settled: ReadingSpec = { ...guessed, units: { ...guessed.units, x: 'px' } };
    const { inspection, read: outcome } = takeIn(bytesOf(TIMED), 'a.csv', { frameInterval: '9' }, settled);
    expect(inspection).toMatchObject({ failed: false, required: ['pixelSize'], spec: settled });
    expect(outcome).toBeNull();
    const whole = takeIn(bytesOf(TIMED), 'a.csv', {}, { ...settled, pixelSize: '2' });
    expect(whole.read).toMatchObject({
      failed: false,
      summary: {
        bounds: [
          [2, 6],
          [1, 3],
        ],
      },
    });
  });

  test.each([
    ['columns that are no whole numbers', { columns: { ...guessed.columns, x: 1.5 } }, /whole number/],
    ['a column below zero', { columns: { ...guessed.columns, x: -1 } }, /whole number/],
    [
      'neither time nor frame',
      { columns: { ...guessed.columns, time: null } },
      /either a time column or a frame/,
    ],
    ['z without y', { columns: { ...guessed.columns, z: 3, y: null } }, /no y column/],
    ['an axis without its unit', { units: { ...guessed.units, y: null } }, /y column and its unit/],
    ['a unit without its axis', { units: { ...guessed.units, z: 'um' as const } }, /z column and its unit/],
    ['a time without its unit', { units: { ...guessed.units, time: null } }, /time column and its unit/],
    ['names below the data', { dialect: { ...guessed.dialect, headerLine: 2 } }, /stand above/],
    ['units below the data', { dialect: { ...guessed.dialect, unitsLine: 5 } }, /stand above/],
    ['a first line before the file', { dialect: { ...guessed.dialect, firstDataLine: 0 } }, /stand above/],
    ['a first line beyond its end', { dialect: { ...guessed.dialect, firstDataLine: 99 } }, /Not one row/],
    ['an interval of words', { frameInterval: 'half' }, /frame interval must be a number/],
    ['an interval below zero', { frameInterval: '-0.5' }, /frame interval must be a number/],
    ['an interval too small for a double', { frameInterval: '1e-400' }, /frame interval must be a number/],
    ['a pixel size with a comma', { pixelSize: '0,1' }, /pixel size must be a number/],
    ['an exposure in words', { exposure: { seconds: 'long' } }, /exposure must be a number of seconds/],
    ['an exposure below zero', { exposure: { seconds: '-1' } }, /exposure must be a number of seconds/],
    ['half an exposure too much', { exposure: { fraction: '1.01' } }, /fraction from 0 to 1/],
  ])('%s: refused with the reason', (_, change: Partial<ReadingSpec>, reason) => {
    const { read: outcome } = takeIn(bytesOf(TIMED), 'a.csv', {}, { ...guessed, ...change });
    if (!outcome?.failed) throw new Error('not refused');
    expect(outcome.message).toMatch(reason);
    expect(outcome.message).toMatch(/\.$/);
  });

  test('frames without an interval and pixels without a size have failures of their own', () => {
    const framed = {
      ...guessed,
      columns: { ...guessed.columns, time: null, frame: 1 },
      units: { ...guessed.units, time: null },
    };
    expect(tryRead(TIMED, {}, () => framed)).toMatchObject({ failed: true, code: 'needs-frame-interval' });
    const pixels = { ...guessed, units: { ...guessed.units, x: 'px' as const } };
    expect(tryRead(TIMED, {}, () => pixels)).toMatchObject({ failed: true, code: 'needs-pixel-size' });
  });
});

test('a file that is refused is not read, whatever is stated', () => {
  const { inspection, read: outcome } = takeIn(bytesOf('%PDF-1.7'), 'a.csv', {
    frameInterval: '1',
    pixelSize: '1',
  });
  expect(inspection).toMatchObject({ failed: true, code: 'binary' });
  expect(outcome).toBeNull();
});

test('the worker of the server goes the same way, and keeps the columns to itself', () => {
  const bytes = bytesOf(TIMED);
  const stated = { exposure: { fraction: '1' } } as const;
  const { inspection, read: outcome } = takeIn(bytes, 'a.csv', stated);
  if (inspection.failed || !outcome || outcome.failed) throw new Error('refused');
  const { trajectories: _, ...told } = outcome;
  expect(handle({ kind: 'intake', bytes, name: 'a.csv', stated, spec: null })).toEqual({
    inspection,
    read: told,
  });
  expect(handle({ kind: 'read', bytes, spec: inspection.spec })).toEqual(told);
});

test('a reading in one sentence', () => {
  const pixels = { pixelSize: '0.107', frameInterval: '0.04' };
  expect(describeReading(state(FRAMES, pixels).spec, read(FRAMES, pixels).summary)).toBe(
    '1 track, 3 frames at 0.04 s, comma-separated, positions in pixels of 0.107 µm',
  );
  const german = 'track;t (s);x (µm);y (nm)\n1;0;0,5;1\n2;0,5;0,75;2\n';
  expect(describeReading(inspect(german).spec, read(german).summary)).toBe(
    '2 tracks, 2 frames, semicolon-separated with decimal comma, positions in µm and nm',
  );
});
