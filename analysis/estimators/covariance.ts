import type { Segment } from '../input/segments';

export interface CovarianceEstimate {
  /** µm²/s; unbiased, so it may come out negative when the truth is near zero. */
  readonly D: number;
  /** µm²; may be negative. */
  readonly sigmaSquared: number;
  /** Standard error of D, µm²/s, for one series of this many displacements in all; null for a non-positive D. */
  readonly seD: number | null;
  /** Axis-displacements used. */
  readonly displacements: number;
}

/**
 * Covariance-based estimate: D̂ = ⟨Δ²⟩/(2Δt) + ⟨Δ_iΔ_(i+1)⟩/Δt, σ̂² = R⟨Δ²⟩ + (2R−1)⟨Δ_iΔ_(i+1)⟩, over all series.
 * @param interval - Δt, seconds.   @param blur - R, 0 to 1/6.
 * @returns null when no series has two displacements in a row.
 * Source: Vestergaard, Blainey & Flyvbjerg 2014, Phys. Rev. E 89:022726 (from memory, checked numerically).
 */
export function covarianceEstimate(
  segments: readonly Segment[],
  interval: number,
  blur: number,
): CovarianceEstimate | null {
  let squares = 0;
  let products = 0;
  let n = 0;
  let pairs = 0;
  for (const segment of segments) {
    for (const steps of segment.displacements) {
      for (let i = 0; i < steps.length; i++) {
        squares += steps[i]! ** 2;
        if (i > 0) products += steps[i]! * steps[i - 1]!;
      }
      n += steps.length;
      pairs += steps.length - 1;
    }
  }
  if (pairs <= 0) return null;
  const square = squares / n;
  const product = products / pairs;
  const D = square / (2 * interval) + product / interval;
  const sigmaSquared = blur * square + (2 * blur - 1) * product;
  return {
    D,
    sigmaSquared,
    seD: D > 0 ? D * relativeError(sigmaSquared / (D * interval) - 2 * blur, n) : null,
    displacements: n,
  };
}

/** √Var(D̂)/D of the covariance-based estimate for one series of n displacements: (6 + 4ε + 2ε²)/n + 4(1+ε)²/n². */
export function relativeError(epsilon: number, n: number): number {
  return Math.sqrt((6 + 4 * epsilon + 2 * epsilon ** 2) / n + (4 * (1 + epsilon) ** 2) / n ** 2);
}
