import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { analyse, DEFAULT_SETTINGS } from '../../analysis/analyse';
import { simulateDataSet } from '../../analysis/simulate/data-set';
import type { AnalysisSettings, Trajectories } from '../../analysis/types';
import { succeed } from './golden';

/** Positions nobody would publish: each gets an answer that names the trouble, and never NaN. */

function one(rows: readonly (readonly number[])[], more: Partial<Trajectories> = {}): Trajectories {
  const dims = (rows[0]?.length ?? 2) - 1;
  return {
    hash: 'h',
    trackIds: ['1'],
    track: new Int32Array(rows.length),
    frame: null,
    time: Float64Array.from(rows, (row) => row[0]!),
    axes: Array.from({ length: dims }, (_, axis) => Float64Array.from(rows, (row) => row[axis + 1]!)),
    frameInterval: null,
    exposure: { fraction: 0 },
    ...more,
  };
}

const walk = simulateDataSet({
  seed: 5,
  tracks: 3,
  frames: 40,
  physics: () => ({ D: 0.5, interval: 0.1, exposure: 0, sigma: 0.05, velocity: [0, 0], box: null }),
});

const outcome = (reading: Trajectories | Trajectories[], settings: Partial<AnalysisSettings> = {}) =>
  analyse(Array.isArray(reading) ? reading : [reading], { ...DEFAULT_SETTINGS, ...settings });
const codeOf = (reading: Trajectories | Trajectories[], settings: Partial<AnalysisSettings> = {}) => {
  const found = outcome(reading, settings);
  return 'failed' in found ? found.code : found.warnings.map((warning) => warning.code);
};

describe('nothing to analyse is said with its reason', () => {
  test.each([
    ['no reading', [], 'no-readings'],
    ['one position', [one([[0, 1, 2]])], 'no-displacements'],
    [
      'two positions at one time',
      [
        one([
          [1, 1, 2],
          [1, 3, 4],
        ]),
      ],
      'no-displacements',
    ],
    [
      'the same position always',
      [
        one([
          [0, 1, 2],
          [1, 1, 2],
          [2, 1, 2],
        ]),
      ],
      'nothing-moves',
    ],
    [
      'times that hardly differ',
      [
        one([
          [0, 5, 1],
          [1e-20, 6, 3],
          [2e-20, 8, 5],
        ]),
      ],
      'interval-impossible',
    ],
    [
      'two columns that count',
      [
        one([
          [0, 5, 1],
          [1, 6, 3],
          [2, 7, 5],
          [3, 8, 7],
        ]),
      ],
      'nothing-diffuses',
    ],
    [
      'no readable position',
      [
        one([
          [0, NaN, 2],
          [1, 1, Infinity],
        ]),
      ],
      'no-displacements',
    ],
    [
      'no two frames in a row',
      [
        one(
          [
            [0, 1, 2],
            [2, 2, 3],
            [5, 3, 3],
          ],
          { frameInterval: 1 },
        ),
      ],
      'no-displacements',
    ],
    [
      'frames without an interval',
      [
        one(
          [
            [0, 1, 2],
            [1, 2, 2],
          ],
          { time: null, frame: Int32Array.of(0, 1) },
        ),
      ],
      'needs-frame-interval',
    ],
    [
      'times without a rhythm',
      [
        one([
          [0, 0, 0],
          [1, 1, 0],
          [2.4, 1, 1],
          [3.1, 2, 0],
          [5.6, 2, 2],
          [6, 1, 3],
        ]),
      ],
      'irregular-intervals',
    ],
    [
      'intervals that differ',
      [walk, { ...walk, hash: 'b', time: walk.time!.map((t) => 2 * t) }],
      'intervals-differ',
    ],
  ] as const)('%s', (_, readings, code) => {
    const found = outcome([...readings]);
    expect(found).toMatchObject({ failed: true, code });
    // Says what is the matter and does not speak in codes.
    expect('failed' in found && found.message.length).toBeGreaterThan(40);
  });
});

describe('what is left out is counted, with the reason', () => {
  test('an unreadable position is a gap', () => {
    const axes = walk.axes.map((axis) => axis.slice());
    axes[1]![10] = NaN;
    const result = succeed([{ ...walk, axes }]);
    expect(result.exclusions).toContainEqual({ what: 'rows', reason: 'position not readable', count: 1 });
    expect(result).toMatchObject({ gaps: 1, displacements: 3 * 39 - 2, frames: 119 });
  });

  test('the same row twice counts once; two positions in one frame count not at all', () => {
    const rows: number[][] = Array.from({ length: 30 }, (_, i) => [i, Math.sin(i * i), Math.cos(3 * i * i)]);
    const doubled = succeed([one([...rows, rows[4]!])]);
    expect(doubled.exclusions).toContainEqual({ what: 'rows', reason: 'same row twice', count: 1 });
    expect(doubled.displacements).toBe(29);
    const conflicting = succeed([one([...rows, [4, 9, 9]])]);
    expect(conflicting.exclusions).toContainEqual({
      what: 'rows',
      reason: 'two positions in one frame',
      count: 2,
    });
    expect(conflicting.displacements).toBe(27);
    expect(conflicting.warnings.find((warning) => warning.code === 'conflicts')?.level).toBe('problem');
  });

  test('ids are text: 007 and 7 are two tracks', () => {
    const rows = Array.from({ length: 20 }, (_, i) => [i, Math.sin(i * i), Math.cos(3 * i * i)]);
    const both = one([...rows, ...rows.map(([t, x, y]) => [t!, y!, x!])], {
      trackIds: ['007', '7'],
      track: Int32Array.from({ length: 40 }, (_, i) => (i < 20 ? 0 : 1)),
    });
    expect(succeed([both])).toMatchObject({ tracks: 2, displacements: 38 });
  });

  test('an axis that never changes is not one; nor is one more than the file has', () => {
    const flat = { ...walk, axes: [...walk.axes, new Float64Array(walk.track.length).fill(3)] };
    expect(succeed([flat]).dims).toBe(2);
    expect(codeOf(flat)).toContain('axis-constant');
    expect(succeed([flat], { dims: 3 }).dims).toBe(2);
    expect(codeOf(walk, { dims: 3 })).toContain('dims-reduced');
    expect(succeed([walk], { dims: 1 }).dims).toBe(1);
  });

  test('tracks left out by hand, and short ones', () => {
    const result = succeed([walk], {
      excludedTracks: [
        { reading: 0, track: '2', reason: 'left the focus' },
        { reading: 0, track: '99', reason: 'typo' },
      ],
    });
    expect(result.tracks).toBe(2);
    expect(result.exclusions).toContainEqual({ what: 'tracks', reason: 'left out by hand', count: 1 });
    expect(result.warnings.map((warning) => warning.code)).toContain('excluded-track-missing');
    expect(codeOf(walk, { minTrackFrames: 41 })).toBe('no-tracks');
  });
});

describe('warnings', () => {
  test('an unstated exposure counts as zero, one longer than the interval as the whole interval', () => {
    expect(codeOf({ ...walk, exposure: null })).toContain('exposure-not-stated');
    expect(succeed([{ ...walk, exposure: null }]).exposureFraction).toBe(0);
    expect(codeOf({ ...walk, exposure: { seconds: 0.3 } })).toContain('exposure-too-long');
    expect(succeed([{ ...walk, exposure: { seconds: 0.05 } }]).exposureFraction).toBeCloseTo(0.5, 12);
  });

  test('a wrong exposure moves σ², not D (Berglund 2010: D does not depend on R)', () => {
    const none = succeed([walk], { exposure: { fraction: 0 } });
    const full = succeed([walk], { exposure: { fraction: 1 } });
    expect(full.D!.value).toBeCloseTo(none.D!.value, 9);
    expect(full.sigmaSquared!.value - none.sigmaSquared!.value).toBeCloseTo((none.D!.value * 0.1) / 3, 9);
  });

  test('water that is not liquid gives no size', () => {
    const settings = { medium: { name: 'water' as const }, temperature: 150, particleDiameter: 1 };
    expect(codeOf(walk, settings)).toContain('water-range');
    expect(succeed([walk], settings).stokesEinstein).toMatchObject({ viscosity: null, diameter: null });
  });

  test('a drift that is kept although it is there', () => {
    const flow = { ...walk, axes: [walk.axes[0]!.map((x, i) => x + 20 * walk.time![i]!), walk.axes[1]!] };
    expect(codeOf(flow, { drift: 'keep' })).toContain('drift-kept');
    expect(succeed([flow]).drift).toMatchObject({ removed: true, significant: true });
    expect(succeed([flow], { drift: 'keep' }).D!.value).toBeGreaterThan(2 * succeed([flow]).D!.value);
  });
});

test('whatever the numbers are, a result is finite or null throughout', () => {
  const value = fc.oneof(
    fc.double({ noNaN: false }),
    fc.constantFrom(0, -0, 1e-300, 1e300, -1e300, NaN, Infinity, 1, 2),
    fc.double({ min: -10, max: 10, noNaN: true }),
  );
  const row = fc.tuple(fc.oneof(fc.integer({ min: 0, max: 12 }), value), value, value);
  const finite = (thing: unknown): boolean =>
    typeof thing === 'number'
      ? Number.isFinite(thing)
      : thing === null || typeof thing !== 'object' || Object.values(thing).every(finite);
  fc.assert(
    fc.property(
      fc.array(row, { maxLength: 30 }),
      fc.constantFrom(null, 0.5, 1),
      fc.constantFrom(null, 0, 0.1, 1e-200),
      (rows, frameInterval, sigma) => {
        const found = outcome(one(rows.length > 0 ? rows : [[0, 0, 0]], { frameInterval }), { sigma });
        if (!('failed' in found)) expect(finite(found)).toBe(true);
        else expect(found.message).not.toBe('');
      },
    ),
    { numRuns: 1000 },
  );
});
