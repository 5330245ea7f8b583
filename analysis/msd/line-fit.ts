import type { LineFit } from '../types';
import { fitLine } from '../fit/line';
import type { MsdSums } from './ensemble';

/**
 * Number of lags that makes the least-squares D of an MSD curve most precise: p = min(L_b, f_b), f_b = 2 + 1.35x^0.6,
 * L_b = 0.8 + 0.564N′, at least 2.
 * @param x - reduced localisation error σ²/(DΔt), ≥ 0.   @param positions - N′ of a track.
 * Source: Michalet & Berglund 2012, Phys. Rev. E 85:061916 (from memory; within 1.2 % of the exact optimum).
 */
export function optimalLags(x: number, positions: number): number {
  return Math.max(2, Math.floor(Math.min(0.8 + 0.564 * positions, 2 + 1.35 * Math.max(x, 0) ** 0.6)));
}

/**
 * Straight line through the first points of the MSD curve, for comparison with the likelihood's D. Its ordinary errors are
 * meaningless, because the points are correlated, so none is given.
 * @param range - first and last lag, frames; null: lags 1 to the optimal number, found by turns.
 * @returns null when fewer than two lags lie in the range.
 */
export function lineFit(
  msd: MsdSums,
  dims: number,
  interval: number,
  blur: number,
  range: { first: number | null; last: number | null },
  positions: number,
): LineFit | null {
  const first = range.first ?? 1;
  let last = range.last ?? first + 1;
  for (let turn = 0; ; turn++) {
    const chosen = msd.lags.flatMap((lag, i) => (lag >= first && lag <= last ? [i] : []));
    if (chosen.length < 2) return null;
    const line = fitLine(
      chosen.map((i) => msd.lags[i]! * interval),
      chosen.map((i) => msd.total[i]!),
    );
    const D = line.slope / (2 * dims);
    const fit = {
      lagFirst: msd.lags[chosen[0]!]!,
      lagLast: msd.lags[chosen.at(-1)!]!,
      D,
      intercept: line.intercept,
    };
    if (range.last !== null || turn === 3 || !(D > 0)) return fit;
    const sigmaSquared = line.intercept / (2 * dims) + 2 * blur * D * interval;
    const next = first - 1 + optimalLags(sigmaSquared / (D * interval), positions);
    if (next === last) return fit;
    last = Math.max(next, first + 1);
  }
}
