import { requirePositive, requireWholeFrom } from '../check';
import { noiseSpectrum } from '../spectrum/sine-transform';

/** A measurement that is planned. */
export interface Plan {
  /** Measured axes. */
  readonly dims: 1 | 2 | 3;
  readonly tracks: number;
  /** Positions in each track. */
  readonly frames: number;
  /** Frame interval Δt, s. */
  readonly interval: number;
  /** Exposure as a fraction of Δt, 0 … 1. */
  readonly exposure: number;
  /** Localisation error per axis, µm. */
  readonly sigma: number;
  /** Diffusion coefficient that is expected, µm²/s. */
  readonly D: number;
}

export interface Precision {
  /** Standard error of D over D. */
  readonly relative: number;
  /** Standard error of σ², µm². */
  readonly sigma2: number;
}

/** Throws where a plan cannot be carried out. */
export function checkPlan(plan: Plan): void {
  requireWholeFrom('tracks', plan.tracks, 1);
  requireWholeFrom('frames', plan.frames, 3);
  requirePositive('frame interval', plan.interval);
  requirePositive('D', plan.D);
  if (!(plan.exposure >= 0 && plan.exposure <= 1))
    throw new RangeError(`exposure must lie between 0 and 1, not ${plan.exposure}`);
  if (!(plan.sigma >= 0 && Number.isFinite(plan.sigma)))
    throw new RangeError(`localisation error must be zero or more, not ${plan.sigma}`);
}

/** Reduced localisation error σ²/(DΔt). */
export const reducedError = (plan: Pick<Plan, 'sigma' | 'D' | 'interval'>): number =>
  plan.sigma ** 2 / (plan.D * plan.interval);

/**
 * Best precision that any unbiased estimate can have (Cramér–Rao), D and σ² both unknown: the inverse of
 * ½ Σ_k n_k ∂λ_k ∂λ_k ᵀ/λ_k² with λ_k = DΔt(2 − (e/3)b_k) + σ²b_k. The engine's estimate attains it within 5 % where it
 * is below 0.15. Source: Berglund 2010, Phys. Rev. E 82:011917.
 */
export function precisionOf(plan: Plan): Precision {
  checkPlan(plan);
  const x = reducedError(plan);
  const n = plan.dims * plan.tracks;
  let aa = 0;
  let ab = 0;
  let bb = 0;
  for (const b of noiseSpectrum(plan.frames - 1)) {
    const a = 2 - (plan.exposure * b) / 3;
    const lambda = a + x * b;
    aa += (n * a * a) / (2 * lambda * lambda);
    ab += (n * a * b) / (2 * lambda * lambda);
    bb += (n * b * b) / (2 * lambda * lambda);
  }
  const determinant = aa * bb - ab * ab;
  return {
    relative: Math.sqrt(bb / determinant),
    sigma2: Math.sqrt(aa / determinant) * plan.D * plan.interval,
  };
}

/**
 * Axis-displacements that long tracks need for a precision: (2 + 4√(1 + 2ε))/target², ε = x − e/3. Divide by the number
 * of axes for displacements. Source: Berglund 2010; short tracks need some per cent more (`tracksFor`).
 */
export function axisDisplacementsFor(target: number, plan: Omit<Plan, 'tracks' | 'frames'>): number {
  requirePositive('target', target);
  const epsilon = reducedError(plan) - plan.exposure / 3;
  return (2 + 4 * Math.sqrt(1 + 2 * epsilon)) / target ** 2;
}

/** Tracks of the planned length that are needed for SE(D)/D ≤ target, by the exact bound. */
export function tracksFor(target: number, plan: Omit<Plan, 'tracks'>): number {
  requirePositive('target', target);
  return Math.ceil((precisionOf({ ...plan, tracks: 1 }).relative / target) ** 2 * (1 - 1e-12));
}

export interface FrameRateChoice {
  readonly interval: number;
  readonly frames: number;
  readonly sigma: number;
  readonly relative: number;
}

/**
 * Precision at several frame intervals when each track lasts `duration` seconds whatever the interval.
 * @param light - "each frame": σ is the same at any interval; "each second": light is spread over the frames, so that
 *   σ² goes with 1/Δt, and is as planned at the planned interval.
 * @returns one choice an interval that leaves at least three frames, in the order given.
 */
export function frameRates(
  plan: Omit<Plan, 'frames'>,
  duration: number,
  intervals: readonly number[],
  light: 'each frame' | 'each second',
): FrameRateChoice[] {
  requirePositive('duration', duration);
  return intervals.flatMap((interval) => {
    requirePositive('frame interval', interval);
    const frames = Math.floor(duration / interval + 1e-9) + 1;
    if (frames < 3) return [];
    const sigma = light === 'each frame' ? plan.sigma : plan.sigma * Math.sqrt(plan.interval / interval);
    return [
      { interval, frames, sigma, relative: precisionOf({ ...plan, interval, frames, sigma }).relative },
    ];
  });
}
