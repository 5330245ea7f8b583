import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { simulateDataSet } from '../../analysis/simulate/data-set';
import type { AnalysisResult, Trajectories } from '../../analysis/types';
import { apart, succeed } from './golden';

/** What must not matter, and what must scale: true of every data set, so it is tried on many. */

const plan = fc.record({
  seed: fc.integer({ min: 1, max: 1e9 }),
  tracks: fc.integer({ min: 1, max: 6 }),
  frames: fc.integer({ min: 12, max: 60 }),
  missing: fc.constantFrom(0, 0.1),
  dims: fc.integer({ min: 1, max: 3 }),
  sigma: fc.constantFrom(0.02, 0.1),
  speed: fc.constantFrom(0, 2),
});

const data = plan.map((p) =>
  simulateDataSet({
    seed: p.seed,
    tracks: p.tracks,
    frames: p.frames,
    missing: p.missing,
    field: 50,
    physics: () => ({
      D: 0.5,
      interval: 0.1,
      exposure: 0.5,
      sigma: p.sigma,
      velocity: Array.from({ length: p.dims }, (_, axis) => (axis === 0 ? p.speed : 0)),
      box: null,
    }),
  }),
);

const RUNS = { numRuns: 25 };

function mapAxes(set: Trajectories, f: (value: number, axis: number) => number): Trajectories {
  return { ...set, axes: set.axes.map((axis, i) => axis.map((value) => f(value, i))) };
}

function reorder(set: Trajectories, order: readonly number[]): Trajectories {
  return {
    ...set,
    track: Int32Array.from(order, (row) => set.track[row]!),
    time: Float64Array.from(order, (row) => set.time![row]!),
    axes: set.axes.map((axis) => Float64Array.from(order, (row) => axis[row]!)),
  };
}

/** The numbers of two results agree; D, its ends, σ² and the drift's speed, each relative to its own size. */
function agree(a: AnalysisResult, b: AnalysisResult, tolerance: number, scale = { D: 1, length: 1 }) {
  expect(b.verdict).toBe(a.verdict);
  expect(b.tracks).toBe(a.tracks);
  expect(b.displacements).toBe(a.displacements);
  expect(b.D === null).toBe(a.D === null);
  if (a.D && b.D) {
    expect(apart(b.D.value, a.D.value * scale.D)).toBeLessThan(tolerance);
    for (const end of ['lo', 'hi'] as const) {
      expect(b.D[end] === null).toBe(a.D[end] === null);
      if (a.D[end] !== null)
        expect(apart(b.D[end]!, a.D[end] * scale.D, a.D.value * scale.D)).toBeLessThan(100 * tolerance);
    }
    const square = scale.length ** 2;
    expect(
      apart(b.sigmaSquared!.value, a.sigmaSquared!.value * square, square * a.D.value * a.frameInterval!),
    ).toBeLessThan(100 * tolerance);
  }
  a.msd!.total.forEach((value, i) =>
    expect(apart(b.msd!.total[i]!, value * scale.length ** 2)).toBeLessThan(tolerance),
  );
}

describe('what must not matter', () => {
  test('an offset of a million micrometres', () => {
    fc.assert(
      fc.property(data, (set) => {
        // What is kept of the positions there: about 1e-10 µm, against steps of 0.3 µm.
        agree(succeed([set]), succeed([mapAxes(set, (x, axis) => x + (axis % 2 === 0 ? 1e6 : -1e6))]), 1e-7);
      }),
      RUNS,
    );
  });

  test('the order of the rows, to the last digit', () => {
    fc.assert(
      fc.property(data, fc.integer(), (set, salt) => {
        const order = Array.from(set.track.keys());
        // Within a track and between tracks: a fixed shuffle from the salt. Track numbers keep their order of appearance.
        order.sort((a, b) => Math.sin(a * 12.9898 + salt) - Math.sin(b * 12.9898 + salt));
        expect(succeed([reorder(set, order)])).toEqual(succeed([set]));
      }),
      RUNS,
    );
  });

  test('the order and the names of the tracks', () => {
    fc.assert(
      fc.property(data, (set) => {
        const last = set.trackIds.length - 1;
        const turned: Trajectories = {
          ...set,
          trackIds: set.trackIds.map((id) => `bead ${id}`).reverse(),
          track: set.track.map((at) => last - at),
        };
        agree(succeed([set]), succeed([turned]), 1e-9);
      }),
      RUNS,
    );
  });

  test('a rotation of the plane', () => {
    fc.assert(
      fc.property(
        data.filter((set) => set.axes.length === 2),
        fc.double({ min: 0, max: 6.28, noNaN: true }),
        (set, angle) => {
          const [x, y] = set.axes as [Float64Array, Float64Array];
          const turned = {
            ...set,
            axes: [
              x.map((value, i) => value * Math.cos(angle) - y[i]! * Math.sin(angle)),
              x.map((value, i) => value * Math.sin(angle) + y[i]! * Math.cos(angle)),
            ],
          };
          agree(succeed([set]), succeed([turned]), 1e-7);
        },
      ),
      RUNS,
    );
  });

  test('a mirror, and time that starts elsewhere', () => {
    fc.assert(
      fc.property(data, (set) => {
        const later = { ...mapAxes(set, (x) => -x), time: set.time!.map((t) => t + 3600) };
        agree(succeed([set]), succeed([later]), 1e-7);
      }),
      RUNS,
    );
  });

  test('whether tracks come in one file or in two', () => {
    fc.assert(
      fc.property(
        data.filter((set) => set.trackIds.length >= 2),
        (set) => {
          const cut = set.track.findIndex((at) => at > 0);
          const rows = Array.from(set.track.keys());
          const part = (hash: string, own: readonly number[]) => ({ ...reorder(set, own), hash });
          agree(
            succeed([set]),
            succeed([part('one', rows.slice(0, cut)), part('other', rows.slice(cut))]),
            1e-9,
          );
        },
      ),
      RUNS,
    );
  });
});

describe('what must scale', () => {
  test('lengths c times as long make D c² times as large', () => {
    fc.assert(
      fc.property(data, fc.constantFrom(1e-4, 0.107, 1000), (set, c) => {
        agree(succeed([set]), succeed([mapAxes(set, (x) => x * c)]), 1e-7, { D: c * c, length: c });
      }),
      RUNS,
    );
  });

  test('times c times as long make D c times smaller', () => {
    fc.assert(
      fc.property(data, fc.constantFrom(1e-3, 60), (set, c) => {
        const slower = { ...set, time: set.time!.map((t) => t * c) };
        agree(succeed([set]), succeed([slower]), 1e-7, { D: 1 / c, length: 1 });
      }),
      RUNS,
    );
  });
});

test('the same input gives the same result, and the input is left as it was', () => {
  fc.assert(
    fc.property(data, (set) => {
      const before = structuredClone(set);
      const once = succeed([set]);
      expect(succeed([set])).toEqual(once);
      expect(set).toEqual(before);
      // A result is plain: what JSON keeps of it is all of it.
      expect(JSON.parse(JSON.stringify(once))).toEqual(once);
    }),
    RUNS,
  );
});
