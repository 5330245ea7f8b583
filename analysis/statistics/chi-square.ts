/** Upper tail of the normal and χ² laws, precise where the tail is thin: what tests with very small levels need. */

/** erfc(z) = 2/√π ∫_z^∞ e^(−t²)dt for z ≥ 0. Sources: series and continued fraction 7.6.1, 7.9.4 of the NIST DLMF. */
export function complementaryError(z: number): number {
  if (!(z >= 0)) throw new RangeError(`z must be zero or more, not ${z}`);
  if (z < 2) {
    let term = z;
    let sum = z;
    for (let n = 1; n < 80 && Math.abs(term) > 1e-18 * Math.abs(sum); n++) {
      term *= (-z * z) / n;
      sum += term / (2 * n + 1);
    }
    return 1 - (2 / Math.sqrt(Math.PI)) * sum;
  }
  // z + (1/2)/(z + 1/(z + (3/2)/(z + …))), from the inside out.
  let fraction = z;
  for (let n = 120; n >= 1; n--) fraction = z + n / 2 / fraction;
  return Math.exp(-z * z) / (Math.sqrt(Math.PI) * fraction);
}

/** P(χ²_d > x). @param d - 1, 2 or 3 degrees of freedom.   @param x - zero or more. */
export function chiSquareTail(d: 1 | 2 | 3, x: number): number {
  if (d === 2) return Math.exp(-x / 2);
  const one = complementaryError(Math.sqrt(x / 2));
  return d === 1 ? one : one + Math.sqrt((2 * x) / Math.PI) * Math.exp(-x / 2);
}

/** x with P(χ²_d > x) = p. @param p - between 0 and 1. */
export function chiSquareQuantile(d: 1 | 2 | 3, p: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`p must lie between 0 and 1, not ${p}`);
  let lo = 0;
  let hi = 2;
  while (chiSquareTail(d, hi) > p) hi *= 2;
  for (let i = 0; i < 200 && hi - lo > 1e-12 * hi; i++) {
    const middle = (lo + hi) / 2;
    if (chiSquareTail(d, middle) > p) lo = middle;
    else hi = middle;
  }
  return (lo + hi) / 2;
}
