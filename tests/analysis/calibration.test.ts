import { describe, expect, test } from 'vitest';
import { simulateDataSet } from '../../analysis/simulate/data-set';
import type { AnalysisResult } from '../../analysis/types';
import { succeed } from './golden';

/**
 * Small, seeded simulations: does the 95 % interval hold the truth as often as it says, and is free motion called free?
 * Bounds are four standard deviations of the count wide, so they fail for a wrong method, not for bad luck; the seeds are
 * fixed, so they never fail by turns.
 */
interface Cell {
  readonly name: string;
  readonly tracks: number;
  readonly frames: number;
  readonly sigma: number;
  readonly exposure: number;
  readonly missing?: number;
  readonly repeats: number;
}

const D = 0.5;
const INTERVAL = 0.1;

function simulate(cell: Cell, velocity: readonly number[] = [0, 0]): AnalysisResult[] {
  return Array.from({ length: cell.repeats }, (_, repeat) =>
    succeed([
      simulateDataSet({
        seed: 1000 * cell.tracks + 7919 * repeat + cell.frames,
        tracks: cell.tracks,
        frames: cell.frames,
        missing: cell.missing ?? 0,
        physics: () => ({
          D,
          interval: INTERVAL,
          exposure: cell.exposure,
          sigma: cell.sigma,
          velocity,
          box: null,
        }),
      }),
    ]),
  );
}

/** Four standard deviations of a share p counted in n trials. */
const slack = (p: number, n: number) => 4 * Math.sqrt((p * (1 - p)) / n);
const share = (results: readonly AnalysisResult[], is: (one: AnalysisResult) => boolean) =>
  results.filter(is).length / results.length;

// σ = 0.112 µm is σ²/(DΔt) = 0.25; σ = 0.224 µm is 1.
const cells: Cell[] = [
  { name: 'one track of 50 frames', tracks: 1, frames: 50, sigma: 0.112, exposure: 0, repeats: 200 },
  {
    name: 'one track of 300 frames, blurred',
    tracks: 1,
    frames: 300,
    sigma: 0.112,
    exposure: 1,
    repeats: 120,
  },
  { name: '20 tracks of 50 frames, noisy', tracks: 20, frames: 50, sigma: 0.224, exposure: 1, repeats: 120 },
  {
    name: '20 tracks of 50 frames with gaps',
    tracks: 20,
    frames: 50,
    sigma: 0.112,
    exposure: 0.5,
    missing: 0.1,
    repeats: 100,
  },
];

describe.each(cells)('$name, free diffusion', (cell) => {
  const results = simulate(cell);

  test('the interval holds the true D in 95 % of cases', () => {
    const held = share(
      results,
      ({ D: found }) => found !== null && (found.lo ?? 0) <= D && D <= (found.hi ?? Infinity),
    );
    expect(held).toBeGreaterThan(0.95 - slack(0.95, cell.repeats));
  });

  test('D is right on the average', () => {
    const logs = results.flatMap((one) => (one.D ? [Math.log(one.D.value / D)] : []));
    const mean = logs.reduce((sum, one) => sum + one, 0) / logs.length;
    const spread = Math.sqrt(logs.reduce((sum, one) => sum + (one - mean) ** 2, 0) / (logs.length - 1));
    // ln D̂ leans down by half its variance when D̂ itself is right on the average.
    expect(Math.abs(mean + spread ** 2 / 2)).toBeLessThan((4 * spread) / Math.sqrt(logs.length));
  });

  test('it is called something else in at most 5 % of cases', () => {
    const wrong = share(
      results,
      (one) => !['free', 'undecided'].includes(one.verdict) || one.sentence.includes('departs from free'),
    );
    expect(wrong).toBeLessThan(0.05 + slack(0.05, cell.repeats));
  });

  test('a σ² that the data contain is found on the average', () => {
    const mean = results.reduce((sum, one) => sum + one.sigmaSquared!.value, 0) / results.length;
    const errors = results.reduce((sum, one) => sum + one.sigmaSquared!.se! ** 2, 0) / results.length;
    expect(Math.abs(mean - cell.sigma ** 2)).toBeLessThan(5 * Math.sqrt(errors / results.length));
  });
});

describe('motion that is not free', () => {
  const cell: Cell = { name: '', tracks: 20, frames: 50, sigma: 0.1, exposure: 0.5, repeats: 40 };

  test('a common flow is called directed, with its velocity and the D of the diffusion beside it', () => {
    const results = simulate(cell, [0.6, -0.3]);
    expect(share(results, (one) => one.verdict === 'directed')).toBeGreaterThan(0.9);
    for (const one of results) {
      one.drift!.velocity.forEach((v, axis) =>
        expect(Math.abs(v - [0.6, -0.3][axis]!)).toBeLessThan(5 * one.drift!.se[axis]!),
      );
    }
    const held = share(results, (one) => one.D!.lo! <= D && D <= one.D!.hi!);
    expect(held).toBeGreaterThan(0.95 - slack(0.95, cell.repeats));
  });

  test('motion between walls is confined, and the size of the box is found', () => {
    const results = Array.from({ length: 20 }, (_, seed) =>
      succeed([
        simulateDataSet({
          seed: seed + 1,
          tracks: 10,
          frames: 100,
          physics: () => ({ D, interval: INTERVAL, exposure: 0, sigma: 0.03, velocity: [0, 0], box: 1.5 }),
        }),
      ]),
    );
    expect(share(results, (one) => one.verdict === 'free')).toBe(0);
    expect(share(results, (one) => one.verdict === 'confined')).toBeGreaterThan(0.9);
    const held = share(results, ({ L }) => L !== null && L.lo! <= 1.5 && L.hi! >= 1.5);
    expect(held).toBeGreaterThan(0.95 - slack(0.95, 20));
  });

  test('a particle that is stuck has no D, only a bound', () => {
    let resolved = 0;
    for (let seed = 1; seed <= 40; seed++) {
      const result = succeed([
        simulateDataSet({
          seed,
          tracks: 1,
          frames: 100,
          physics: () => ({
            D: 1e-9,
            interval: INTERVAL,
            exposure: 0,
            sigma: 0.1,
            velocity: [0, 0],
            box: null,
          }),
        }),
      ]);
      if (result.D !== null) resolved += 1;
      else {
        expect(result.verdict).toBe('undecided');
        expect(result.sentence).toContain('No motion is resolved');
      }
    }
    // 5 % one-sided at the boundary.
    expect(resolved / 40).toBeLessThan(0.05 + slack(0.05, 40));
  });
});
