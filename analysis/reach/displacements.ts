import { requirePositive, requireWholeFrom } from '../check';
import { complementaryError } from '../statistics/chi-square';

/** The distribution of displacements that free diffusion predicts, and how far measured ones are from it. */

export interface Imaging {
  /** Frame interval Δt, s. */
  readonly interval: number;
  /** Exposure as a fraction of Δt, 0 … 1; the shutter is open evenly, so R = e/6. */
  readonly exposure: number;
  /** Localisation error σ per axis, µm. */
  readonly sigma: number;
}

/**
 * Variance of a displacement per axis over n frames, µm²: 2DnΔt − 4RDΔt + 2σ².
 * Sources: Savin & Doyle 2005, Biophys. J. 88:623; Berglund 2010, Phys. Rev. E 82:011917.
 */
export function displacementVariance(D: number, lag: number, imaging: Imaging): number {
  requireWholeFrom('lag', lag, 1);
  requirePositive('frame interval', imaging.interval);
  if (!(D >= 0 && Number.isFinite(D))) throw new RangeError(`D must be zero or more, not ${D}`);
  if (!(imaging.exposure >= 0 && imaging.exposure <= 1))
    throw new RangeError(`exposure must lie between 0 and 1, not ${imaging.exposure}`);
  return 2 * D * imaging.interval * (lag - imaging.exposure / 3) + 2 * imaging.sigma ** 2;
}

/** Full width at half height of a normal law with this variance: 2√(2 ln 2)·√variance. */
export function widthAtHalfHeight(variance: number): number {
  return 2 * Math.sqrt(2 * Math.LN2 * variance);
}

/**
 * Expected counts in the bins of a histogram of one component of the displacements.
 * @param edges - rising, µm; one more than there are bins.   @param total - number of displacements, outside ones too.
 */
export function expectedCounts(
  edges: readonly number[],
  total: number,
  variance: number,
  mean = 0,
): Float64Array {
  requirePositive('variance', variance);
  const scale = Math.sqrt(2 * variance);
  const share = (from: number, to: number): number => {
    // Both ends on the side where the tails are thin, so that a far bin keeps its digits.
    if (from >= 0) return (complementaryError(from) - complementaryError(to)) / 2;
    if (to <= 0) return share(-to, -from);
    return 1 - (complementaryError(-from) + complementaryError(to)) / 2;
  };
  return Float64Array.from({ length: Math.max(0, edges.length - 1) }, (_, i) => {
    const from = (edges[i]! - mean) / scale;
    const to = (edges[i + 1]! - mean) / scale;
    if (!(to >= from)) throw new RangeError('edges must rise');
    return total * share(from, to);
  });
}

export interface NonGaussian {
  /** α₂: 0 for a normal law, CV²(D) for a mixture of free walkers. */
  readonly value: number;
  /** Standard error if the law is normal. */
  readonly se: number;
}

/**
 * Non-Gaussian parameter α₂ = d⟨r⁴⟩/((d+2)⟨r²⟩²) − 1, with standard error √(8/(d(d+2)n)) under a normal law.
 * Source: Rahman 1964, Phys. Rev. 136:A405; the error by the delta method.
 * @param axes - one array of displacements an axis, µm, all at one lag.
 * @param lag - overlapping displacements at lag n count as 1/n of independent ones.   @returns null for no motion at all.
 */
export function nonGaussian(axes: readonly ArrayLike<number>[], lag = 1): NonGaussian | null {
  requireWholeFrom('lag', lag, 1);
  const d = axes.length;
  const n = axes[0]?.length ?? 0;
  let second = 0;
  let fourth = 0;
  for (let i = 0; i < n; i++) {
    let r2 = 0;
    for (const axis of axes) r2 += axis[i]! ** 2;
    second += r2;
    fourth += r2 * r2;
  }
  if (!(second > 0)) return null;
  return {
    value: (d * fourth * n) / ((d + 2) * second * second) - 1,
    se: Math.sqrt((8 * lag) / (d * (d + 2) * n)),
  };
}
