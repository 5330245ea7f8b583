import { describe, expect, test } from 'vitest';
import { fitTwo } from '../../../analysis/estimators/likelihood';
import { minimise } from '../../../analysis/fit/minimise';
import { precisionOf, type Plan } from '../../../analysis/planner/precision';
import {
  driftError,
  driftPower,
  expectedSpectrum,
  framesForShape,
  shapeContrast,
  shapePower,
  shapeThreshold,
  tracksForDrift,
  tracksForShape,
  type Motion,
} from '../../../analysis/planner/power';
import { seededRandom, type Random } from '../../../analysis/random';
import { anomalousMsd, confinedMsd, displacementCovariance } from '../../../analysis/spectrum/models';
import { noiseSpectrum, stationarySpectrum } from '../../../analysis/spectrum/sine-transform';
import { chiSquareQuantile } from '../../../analysis/statistics/chi-square';
import { noncentralityFor, noncentralTail } from '../../../analysis/statistics/noncentral';

const PLAN: Plan = { dims: 2, tracks: 10, frames: 51, interval: 1, exposure: 1, sigma: 0.5, D: 1 };

describe('the noncentral χ² law', () => {
  test.each([
    // Computed by another program: |v|²T/(2D) that finds a drift at the 2.5 % level with 80 and 95 % power.
    [1, 9.5, 15.1],
    [2, 11.5, 17.7],
    [3, 12.9, 19.6],
  ] as const)('%i axes', (d, eighty, most) => {
    const x = chiSquareQuantile(d, 0.025);
    expect(noncentralityFor(d, x, 0.8)).toBeCloseTo(eighty, 1);
    expect(Math.abs(noncentralityFor(d, x, 0.95) - most)).toBeLessThan(0.051);
  });

  test('with one degree it is the two tails of a shifted normal; with none of the shift it is the central law', () => {
    // P(|z + 2| > 1.959964) = 0.5159678 + tail below: table of the normal law.
    expect(noncentralTail(1, 4, 3.841459)).toBeCloseTo(0.5160053, 5);
    expect(noncentralTail(2, 0, 5)).toBeCloseTo(Math.exp(-2.5), 12);
    expect(noncentralTail(3, 2000, 1900)).toBeGreaterThan(0.85);
    expect(() => noncentralTail(1, -1, 1)).toThrow('noncentrality');
    expect(() => noncentralityFor(1, 4, 0.01)).toThrow('power');
  });
});

describe('a drift', () => {
  test('its error is that of the weighted mean: N = 50, x = 1, full exposure, one track: 0.0404265', () => {
    expect(driftError({ ...PLAN, tracks: 1, sigma: 1 }) ** 2).toBeCloseTo(0.0404265, 7);
    // In µm/s whatever the units of time.
    const fast = { ...PLAN, tracks: 1, interval: 0.1, D: 10, sigma: 1 };
    expect(driftError(fast) ** 2).toBeCloseTo(4.04265, 5);
  });

  test('the tracks said to suffice do, and one fewer does not', () => {
    for (const dims of [1, 2, 3] as const) {
      const plan = { ...PLAN, dims };
      const tracks = tracksForDrift(plan, 0.1);
      expect(driftPower({ ...plan, tracks }, 0.1)).toBeGreaterThanOrEqual(0.8);
      expect(driftPower({ ...plan, tracks: tracks - 1 }, 0.1)).toBeLessThan(0.8);
    }
    expect(driftPower(PLAN, 0)).toBeCloseTo(0.025, 10);
  });
});

/** The shape that belongs to one value of the sought parameter. */
const shapeOf = (plan: Plan, alternative: 'alpha' | 'width', value: number) =>
  stationarySpectrum(
    displacementCovariance(
      alternative === 'alpha' ? anomalousMsd(value, plan.exposure) : confinedMsd(value, plan.exposure),
      plan.frames - 1,
    ),
  );

/** Share of simulated measurements, S_k = λ_k χ²_n, in which the best fit of the alternative exceeds the threshold. */
function simulatedPower(plan: Plan, motion: Motion, repeats: number, random: Random): number {
  const expected = expectedSpectrum(plan, motion);
  const group = expected.groups[0]!;
  const n = plan.tracks * plan.dims;
  const b = [noiseSpectrum(group.length)];
  const free = [shapeOf(plan, 'alpha', 1)];
  const kind = 'alpha' in motion ? 'alpha' : 'width';
  let found = 0;
  for (let i = 0; i < repeats; i++) {
    const power = group.power.map((mean) => {
      let chi = 0;
      for (let j = 0; j < n; j++) chi += random.gaussian() ** 2;
      return (mean / n) * chi;
    });
    const drawn = { ...expected, groups: [{ ...group, power }] };
    const at = (value: number) => fitTwo(drawn, [shapeOf(plan, kind, value)], b).minus2LogL;
    const best =
      kind === 'alpha'
        ? minimise(at, 0.05, 1.95).value
        : minimise((log) => at(Math.exp(log)), Math.log(0.3 / plan.frames), Math.log(6)).value;
    if (fitTwo(drawn, free, b).minus2LogL - best > shapeThreshold(plan.tracks)) found++;
  }
  return found / repeats;
}

const noncentralityOf = (plan: Plan, motion: Motion) => shapeContrast(plan, motion).noncentrality;

describe('a shape', () => {
  test.each([
    { motion: { alpha: 0.7 }, name: 'subdiffusion' },
    { motion: { alpha: 1.3 }, name: 'superdiffusion' },
    { motion: { width: 9 }, name: 'confinement' },
  ])('the planned tracks find $name with about 80 % power in a simulation of spectra', ({ motion }) => {
    const tracks = tracksForShape(PLAN, motion);
    const power = simulatedPower({ ...PLAN, tracks }, motion, 250, seededRandom(tracks));
    // 250 repeats scatter by 2.5 %.
    expect(Math.abs(power - shapePower({ ...PLAN, tracks }, motion))).toBeLessThan(0.075);
    expect(power).toBeGreaterThan(0.73);
  });

  test('free diffusion has no noncentrality, and it grows with the tracks', () => {
    expect(noncentralityOf(PLAN, { alpha: 1 })).toBeLessThan(1e-6);
    const one = noncentralityOf(PLAN, { alpha: 0.8 });
    expect(noncentralityOf({ ...PLAN, tracks: 30 }, { alpha: 0.8 }) / one).toBeCloseTo(3, 6);
    expect(shapePower(PLAN, { width: 1e4 })).toBeLessThan(0.013);
  });

  test.each([
    // SE(α) at α = 1 of one track in two dimensions from an exact information matrix (another program), 99 displacements.
    [0, 0.155],
    [0.25, 0.173],
    [1, 0.202],
    [4, 0.258],
  ])('near α = 1 it is (Δα/SE(α))², x = %d', (x, se) => {
    const plan = { ...PLAN, tracks: 1, frames: 100, sigma: Math.sqrt(x) };
    const step = 0.02;
    const mean =
      (noncentralityOf(plan, { alpha: 1 + step }) + noncentralityOf(plan, { alpha: 1 - step })) / 2;
    expect(Math.abs(step / Math.sqrt(mean) / se - 1)).toBeLessThan(0.02);
  });

  test('frames said to suffice do, fewer do not, and what cannot be told is said so', () => {
    const frames = framesForShape(PLAN, { width: 9 })!;
    expect(shapePower({ ...PLAN, frames }, { width: 9 })).toBeGreaterThanOrEqual(0.8);
    expect(shapePower({ ...PLAN, frames: frames - 1 }, { width: 9 })).toBeLessThan(0.8);
    expect(framesForShape({ ...PLAN, tracks: 1 }, { width: 1e6 })).toBeNull();
    expect(() => shapePower(PLAN, { alpha: 2 })).toThrow('exponent');
    expect(precisionOf({ ...PLAN, frames }).relative).toBeLessThan(0.3);
  });
});
