/** Statistical error of MSD points. Points of one curve are strongly correlated: smoothness is no evidence. */

/** Per-axis MSD of the model as a function of the lag in frames, m(0) = 0, µm². */
export type ModelMsd = (lag: number) => number;

/**
 * Covariance of MSD(a) and MSD(b) of one track, summed over d axes, for any Gaussian process with stationary
 * displacements: 2d/(K_aK_b) Σ_o cnt(o) c_o², c_o = ½[m(o+a) + m(o−b) − m(o) − m(o+a−b)].
 * @param positions - N′; K = N′ − lag pairs.   @returns µm⁴.
 * Derived for Gaussian processes (Isserlis); for free diffusion equal to Qian et al. 1991 (checked in the tests).
 */
export function msdCovariance(m: ModelMsd, positions: number, a: number, b: number, dims: number): number {
  const ka = positions - a;
  const kb = positions - b;
  const at = (lag: number) => m(Math.abs(lag));
  let total = 0;
  for (let o = -(kb - 1); o <= ka - 1; o++) {
    const count = Math.min(ka, kb + o) - Math.max(0, o);
    const c = 0.5 * (at(o + a) + at(o - b) - at(o) - at(o + a - b));
    total += count * c * c;
  }
  return (2 * dims * total) / (ka * kb);
}

/** The same for a = b in free diffusion, where c_o vanishes for |o| > lag (for any noise and blur): O(lag) instead of O(N). */
export function msdVariance(m: ModelMsd, positions: number, lag: number, dims: number): number {
  const k = positions - lag;
  const at = (n: number) => m(Math.abs(n));
  let total = 0;
  for (let o = -Math.min(k - 1, lag + 1); o <= Math.min(k - 1, lag + 1); o++) {
    const c = 0.5 * (at(o + lag) + at(o - lag) - 2 * at(o));
    total += (k - Math.abs(o)) * c * c;
  }
  return (2 * dims * total) / (k * k);
}

/** Pairs beyond which the full sum over all pairs of pairs would take too long. */
const LONGEST_SUM = 2000;

type ErrorOf = (m: ModelMsd, trackPairs: Int32Array, lag: number, dims: number) => number;

/**
 * Standard error of the ensemble MSD at one lag: tracks are independent and weigh by their pairs. A track with gaps
 * counts as an unbroken one with as many pairs, which is right to first order.
 */
export const freeError: ErrorOf = ensembleError(msdVariance);

/** The same for any model: the full sum, over at most this many pairs of a track. */
export const generalError: ErrorOf = ensembleError((m, positions, lag, dims) => {
  const most = LONGEST_SUM + lag;
  const shortened = msdCovariance(m, Math.min(positions, most), lag, lag, dims);
  // Beyond many correlation times the variance falls as one over the pairs.
  return positions <= most ? shortened : (shortened * LONGEST_SUM) / (positions - lag);
});

function ensembleError(variance: typeof msdVariance): ErrorOf {
  return (m, trackPairs, lag, dims) => {
    const byPairs = new Map<number, number>();
    let all = 0;
    for (const pairs of trackPairs) {
      if (pairs === 0) continue;
      byPairs.set(pairs, (byPairs.get(pairs) ?? 0) + 1);
      all += pairs;
    }
    let total = 0;
    for (const [pairs, tracks] of byPairs)
      total += tracks * pairs * pairs * variance(m, pairs + lag, lag, dims);
    return Math.sqrt(total) / all;
  };
}
