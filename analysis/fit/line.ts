import { linearRegression } from 'simple-statistics';

export interface Line {
  readonly slope: number;
  readonly intercept: number;
  /** Standard errors; null for two points, which leave nothing to judge by. */
  readonly seSlope: number | null;
  readonly seIntercept: number | null;
  /** Sum of squared residuals. */
  readonly residual: number;
}

/**
 * Straight line through points, all of the same weight. x and y are centred first: a large offset costs no digits.
 * @param x - n ≥ 2 finite values, not all equal.   @param y - n finite values.
 * @throws RangeError - lengths differ, n < 2, a value is not finite, all x equal.
 * Checked against NIST StRD "Norris".
 */
export function fitLine(x: readonly number[], y: readonly number[]): Line {
  if (x.length !== y.length) throw new RangeError(`x has ${x.length} values, y has ${y.length}`);
  if (x.length < 2) throw new RangeError('a line needs at least two points');
  if (![...x, ...y].every(Number.isFinite)) throw new RangeError('a value is not finite');
  if (x.every((value) => value === x[0])) throw new RangeError('all x are equal');
  const n = x.length;
  const meanX = x.reduce((total, value) => total + value, 0) / n;
  const meanY = y.reduce((total, value) => total + value, 0) / n;
  const { m: slope, b: shift } = linearRegression(x.map((value, i) => [value - meanX, y[i]! - meanY]));
  const intercept = meanY + shift - slope * meanX;
  let residual = 0;
  let spread = 0;
  for (let i = 0; i < n; i++) {
    residual += (y[i]! - meanY - shift - slope * (x[i]! - meanX)) ** 2;
    spread += (x[i]! - meanX) ** 2;
  }
  if (n === 2) return { slope, intercept, seSlope: null, seIntercept: null, residual };
  const variance = residual / (n - 2);
  return {
    slope,
    intercept,
    seSlope: Math.sqrt(variance / spread),
    seIntercept: Math.sqrt(variance * (1 / n + (meanX * meanX) / spread)),
    residual,
  };
}
