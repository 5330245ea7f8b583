import { requirePositive } from '../check';
import { gammaTail } from '../statistics/gamma';

/** Free diffusion from a point: how far, with which probability, how soon. D in µm²/s, lengths in µm, times in s. */

type Dims = 1 | 2 | 3;

function requireFromZero(name: string, value: number): void {
  if (!(value >= 0 && Number.isFinite(value)))
    throw new RangeError(`${name} must be zero or more, not ${value}`);
}

/** Root mean square distance after t: √(2dDt). Source: Einstein 1905, Ann. Phys. 322:549. */
export function rmsTravel(D: number, t: number, d: Dims): number {
  requireFromZero('D', D);
  requireFromZero('time', t);
  return Math.sqrt(2 * d * D * t);
}

/** Time after which the rms distance is x: x²/(2dD), s; Infinity when D is 0. */
export function timeToSpread(D: number, x: number, d: Dims): number {
  requireFromZero('D', D);
  requirePositive('distance', x);
  return (x * x) / (2 * d * D);
}

/**
 * Probability to be within r of the start after t: r²/(2Dt) follows χ² with d degrees of freedom (Gaussian propagator;
 * in two dimensions 1 − exp(−r²/4Dt)).
 */
export function chanceWithin(D: number, t: number, r: number, d: Dims): number {
  requireFromZero('D', D);
  requireFromZero('time', t);
  requireFromZero('radius', r);
  if (D === 0 || t === 0) return 1;
  return 1 - gammaTail(d / 2, (r * r) / (4 * D * t));
}

/**
 * Radius that holds a share of the particles after t, µm: share 0.5 is the median distance, 0.95 the 95 % radius.
 * @param share - between 0 and 1.
 */
export function radiusHolding(D: number, t: number, d: Dims, share: number): number {
  requireFromZero('D', D);
  requireFromZero('time', t);
  return Math.sqrt(2 * D * t) * unitRadius(d, share);
}

/** Radius that holds a share of a standard normal cloud, by bisection on the upper tail, which keeps its digits. */
function unitRadius(d: Dims, share: number): number {
  if (!(share > 0 && share < 1)) throw new RangeError(`share must lie between 0 and 1, not ${share}`);
  const outside = 1 - share;
  let lo = 0;
  let hi = 1;
  while (gammaTail(d / 2, (hi * hi) / 2) > outside) hi *= 2;
  for (let i = 0; i < 200 && hi - lo > 1e-14 * hi; i++) {
    const middle = (lo + hi) / 2;
    if (gammaTail(d / 2, (middle * middle) / 2) > outside) lo = middle;
    else hi = middle;
  }
  return (lo + hi) / 2;
}
