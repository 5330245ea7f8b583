import { requirePositive } from '../check';
import { fitTwo } from '../estimators/likelihood';
import { anomalousMsd, confinedMsd, displacementCovariance } from '../spectrum/models';
import { driftSpectrum, noiseSpectrum, stationarySpectrum } from '../spectrum/sine-transform';
import type { Spectrum } from '../spectrum/spectrum';
import { chiSquareQuantile } from '../statistics/chi-square';
import { noncentralityFor, noncentralTail } from '../statistics/noncentral';
import { checkPlan, reducedError, type Plan } from './precision';

/** How much data it takes to tell a drift, an exponent or a confinement from free diffusion. */

/** Share of false alarms of the drift test. */
export const DRIFT_LEVEL = 0.025;

/** Threshold of the shape test, −2ΔlnL: that of the engine's verdict, for one track and for several. */
export const shapeThreshold = (tracks: number): number => (tracks === 1 ? 5.9 : 6.3);

/** A motion that is to be told from free diffusion: MSD ∝ t^α, or confinement to a width (µm) an axis. */
export type Motion = { readonly alpha: number } | { readonly width: number };

/**
 * Standard error of a common velocity per axis, µm/s: Var(v̂Δt) = 1/Σ M g_k²/λ_k for free diffusion with blur and noise.
 */
export function driftError(plan: Plan): number {
  checkPlan(plan);
  const x = reducedError(plan);
  const b = noiseSpectrum(plan.frames - 1);
  const g = driftSpectrum(plan.frames - 1);
  let information = 0;
  for (let k = 0; k < b.length; k++)
    information += g[k]! ** 2 / (2 - (plan.exposure * b[k]!) / 3 + x * b[k]!);
  return Math.sqrt((plan.D * plan.interval) / (plan.tracks * information)) / plan.interval;
}

/** Probability that the test of level 2.5 % finds a common drift of this speed, µm/s. */
export function driftPower(plan: Plan, speed: number): number {
  return noncentralTail(
    plan.dims,
    (speed / driftError(plan)) ** 2,
    chiSquareQuantile(plan.dims, DRIFT_LEVEL),
  );
}

/** Tracks of the planned length with which a drift of this speed is found with the given power. */
export function tracksForDrift(plan: Omit<Plan, 'tracks'>, speed: number, power = 0.8): number {
  requirePositive('speed', speed);
  const needed = noncentralityFor(plan.dims, chiSquareQuantile(plan.dims, DRIFT_LEVEL), power);
  return Math.ceil((needed * driftError({ ...plan, tracks: 1 }) ** 2) / speed ** 2 - 1e-9);
}

/**
 * Spectrum of the planned measurement if the motion is the one in question: the mean of Σû_k², as the data would have it
 * without scatter. D is that of the first frame: MSD per axis 2DΔt·n^α.
 */
export function expectedSpectrum(plan: Plan, motion: Motion): Spectrum {
  checkPlan(plan);
  const length = plan.frames - 1;
  const step = plan.D * plan.interval;
  const shape = stationarySpectrum(displacementCovariance(msdOf(plan, motion), length));
  const n = plan.tracks * plan.dims;
  const noise = noiseSpectrum(length);
  return {
    dims: plan.dims,
    displacements: plan.tracks * length,
    coefficients: n * length,
    groups: [
      {
        length,
        segments: plan.tracks,
        power: shape.map((a, k) => n * (step * a + plan.sigma ** 2 * noise[k]!)),
        fourth: new Float64Array(length),
        sums: Array.from({ length: plan.dims }, () => new Float64Array(length)),
      },
    ],
  };
}

function msdOf(plan: Plan, motion: Motion) {
  if ('alpha' in motion) {
    if (!(motion.alpha > 0 && motion.alpha < 2))
      throw new RangeError(`the exponent must lie between 0 and 2, not ${motion.alpha}`);
    return anomalousMsd(motion.alpha, plan.exposure);
  }
  requirePositive('width', motion.width);
  return confinedMsd((12 * plan.D * plan.interval) / motion.width ** 2, plan.exposure);
}

export interface Contrast {
  /** Expected −2ΔlnL between the true spectrum and the free one that comes nearest; goes with the number of tracks. */
  readonly noncentrality: number;
  /** Standard deviation of −2ΔlnL over 2√noncentrality: 1 for small departures, whatever the number of tracks. */
  readonly spread: number;
}

/**
 * How far the motion stands out: the mean Σ n_k [ln(λ⁰_k/λ_k) + λ_k/λ⁰_k − 1] of the likelihood ratio, at the D and σ²
 * of free diffusion that make it least, and its variance 2 Σ n_k (λ_k/λ⁰_k − 1)².
 */
export function shapeContrast(plan: Plan, motion: Motion): Contrast {
  const spectrum = expectedSpectrum(plan, motion);
  const group = spectrum.groups[0]!;
  const n = plan.tracks * plan.dims;
  const noise = noiseSpectrum(group.length);
  const free = noise.map((b) => 2 - (plan.exposure * b) / 3);
  const nearest = fitTwo(spectrum, [free], [noise]);
  let mean = 0;
  let variance = 0;
  for (let k = 0; k < group.length; k++) {
    const excess = group.power[k]! / n / (nearest.delta * free[k]! + nearest.s * noise[k]!) - 1;
    mean += n * (excess - Math.log1p(excess));
    variance += 2 * n * excess ** 2;
  }
  return { noncentrality: mean, spread: mean > 1e-9 ? Math.sqrt(variance / (4 * mean)) : 1 };
}

/**
 * Probability that the shape test finds the motion: −2ΔlnL as the square of a normal variable with mean √noncentrality
 * and the contrast's spread. With spread 1 this is the noncentral χ² law with one degree of freedom.
 */
export function shapePower(plan: Plan, motion: Motion): number {
  return powerOf(shapeContrast(plan, motion), shapeThreshold(plan.tracks));
}

function powerOf({ noncentrality, spread }: Contrast, threshold: number): number {
  return noncentralTail(1, noncentrality / spread ** 2, threshold / spread ** 2);
}

/** Tracks of the planned length with which the motion is told with the given power; Infinity for free diffusion itself. */
export function tracksForShape(plan: Omit<Plan, 'tracks'>, motion: Motion, power = 0.8): number {
  const one = shapeContrast({ ...plan, tracks: 1 }, motion);
  if (powerOf(one, shapeThreshold(1)) >= power) return 1;
  const needed = noncentralityFor(1, shapeThreshold(2) / one.spread ** 2, power) * one.spread ** 2;
  return Math.max(2, Math.ceil(needed / one.noncentrality - 1e-9));
}

/**
 * Positions a track with which the planned number of tracks tells the motion with the given power.
 * @returns null when even 10,000 positions do not.
 */
export function framesForShape(plan: Omit<Plan, 'frames'>, motion: Motion, power = 0.8): number | null {
  const enough = (frames: number) => shapePower({ ...plan, frames }, motion) >= power;
  const most = 10_000;
  let hi = 4;
  while (hi < most && !enough(hi)) hi = Math.min(most, hi * 2);
  if (!enough(hi)) return null;
  let lo = Math.max(3, Math.floor(hi / 2));
  while (hi - lo > 1) {
    const middle = Math.floor((lo + hi) / 2);
    if (enough(middle)) hi = middle;
    else lo = middle;
  }
  return hi;
}
