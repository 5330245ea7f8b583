import { chiSquareTailOf } from './gamma';

/**
 * P(χ²_d(λ) > x) of the noncentral law: a Poisson mixture of central ones. Source: NIST/SEMATECH e-Handbook and Johnson,
 * Kotz & Balakrishnan, Continuous Univariate Distributions 2, ch. 29.
 * @param d - degrees of freedom, above 0.   @param noncentrality - λ, zero or more.
 */
export function noncentralTail(d: number, noncentrality: number, x: number): number {
  if (!(noncentrality >= 0 && Number.isFinite(noncentrality)))
    throw new RangeError(`noncentrality must be zero or more, not ${noncentrality}`);
  const half = noncentrality / 2;
  if (half === 0) return chiSquareTailOf(d, x);
  const middle = Math.floor(half);
  // Weights relative to the largest one, so that e^(−λ/2) never underflows.
  let total = 0;
  let tail = 0;
  const add = (from: number, step: 1 | -1) => {
    let weight = step === 1 ? 1 : middle / half;
    for (let j = from; j >= 0 && weight > 1e-17; j += step) {
      total += weight;
      tail += weight * chiSquareTailOf(d + 2 * j, x);
      weight *= step === 1 ? half / (j + 1) : j / half;
    }
  };
  add(middle, 1);
  add(middle - 1, -1);
  return tail / total;
}

/** λ at which a test of threshold x has this power. @param power - between its level and 1. */
export function noncentralityFor(d: number, x: number, power: number): number {
  const level = chiSquareTailOf(d, x);
  if (!(power > level && power < 1))
    throw new RangeError(`power must lie between ${level} and 1, not ${power}`);
  let lo = 0;
  let hi = 1;
  while (noncentralTail(d, hi, x) < power) hi *= 2;
  for (let i = 0; i < 200 && hi - lo > 1e-12 * hi; i++) {
    const middle = (lo + hi) / 2;
    if (noncentralTail(d, middle, x) < power) lo = middle;
    else hi = middle;
  }
  return (lo + hi) / 2;
}
