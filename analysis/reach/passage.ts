import { requirePositive } from '../check';
import { complementaryError } from '../statistics/chi-square';

/**
 * First-passage times of free diffusion. D in µm²/s, lengths in µm, times in s.
 * Sources: Berg, Random Walks in Biology (mean times); Crank, The Mathematics of Diffusion, and Redner, A Guide to
 * First-Passage Processes (distribution across a slab).
 */

/**
 * Mean time to reach the far side of a slab of width L whose near side reflects: (L² − x²)/(2D).
 * @param x - start, measured from the reflecting side; 0 unless given.
 */
export function meanTimeAcross(D: number, L: number, x = 0): number {
  requirePositive('D', D);
  requirePlace(x, L);
  return (L * L - x * x) / (2 * D);
}

/** Mean time to reach either side of a slab of width L from x: x(L − x)/(2D). */
export function meanTimeToEitherSide(D: number, L: number, x = L / 2): number {
  requirePositive('D', D);
  requirePlace(x, L);
  return (x * (L - x)) / (2 * D);
}

/**
 * Mean time to leave a circle (d = 2) or sphere (d = 3) of radius R, started at distance r from its centre:
 * (R² − r²)/(2dD).
 */
export function meanTimeOut(D: number, R: number, d: 2 | 3, r = 0): number {
  requirePositive('D', D);
  requirePlace(r, R);
  return (R * R - r * r) / (2 * d * D);
}

function requirePlace(x: number, width: number): void {
  requirePositive('width', width);
  if (!(x >= 0 && x <= width)) throw new RangeError(`the start must lie within ${width}, not at ${x}`);
}

/** Below this Dt/L² the series of images is summed, above it the series of modes: either needs a few terms only. */
const SHORT = 0.25;

/**
 * Probability that a molecule released at the reflecting side of a gap of width L has reached the other side by time t:
 * 1 − (4/π) Σ (−1)^k/(2k+1) exp(−(2k+1)²π²Dt/4L²), or by images 2 Σ (−1)^k erfc((2k+1)L/√(4Dt)).
 */
export function crossedBy(D: number, L: number, t: number): number {
  const s = reduced(D, L, t);
  if (s === 0) return 0;
  let sum = 0;
  if (s < SHORT) {
    for (let k = 0; k < 40; k++) {
      const term = complementaryError((2 * k + 1) / Math.sqrt(4 * s));
      if (term === 0) break;
      sum += k % 2 === 0 ? term : -term;
    }
    return 2 * sum;
  }
  for (let k = 0; k < 40; k++) {
    const m = 2 * k + 1;
    sum += ((k % 2 === 0 ? 1 : -1) / m) * Math.exp((-m * m * Math.PI ** 2 * s) / 4);
  }
  return 1 - (4 / Math.PI) * sum;
}

/** Density of the crossing time, 1/s: the derivative of `crossedBy` in t. */
export function crossingDensity(D: number, L: number, t: number): number {
  const s = reduced(D, L, t);
  if (s === 0) return 0;
  const rate = D / (L * L);
  let sum = 0;
  for (let k = 0; k < 40; k++) {
    const m = 2 * k + 1;
    const sign = k % 2 === 0 ? 1 : -1;
    sum += sign * m * Math.exp(s < SHORT ? (-m * m) / (4 * s) : (-m * m * Math.PI ** 2 * s) / 4);
  }
  return s < SHORT ? (rate * sum) / (Math.sqrt(Math.PI) * s ** 1.5) : rate * Math.PI * sum;
}

/**
 * Time by which a share of the molecules has crossed, s: 0.5 is the median (0.379 L²/D, shorter than the mean, L²/2D).
 * @param share - between 0 and 1.
 */
export function timeUntilCrossed(D: number, L: number, share: number): number {
  if (!(share > 0 && share < 1)) throw new RangeError(`share must lie between 0 and 1, not ${share}`);
  const unit = (L * L) / D;
  reduced(D, L, 0);
  let lo = 0;
  let hi = 1;
  while (crossedBy(1, 1, hi) < share && hi < 100) hi *= 2;
  for (let i = 0; i < 200 && hi - lo > 1e-14 * hi; i++) {
    const middle = (lo + hi) / 2;
    if (crossedBy(1, 1, middle) < share) lo = middle;
    else hi = middle;
  }
  return (unit * (lo + hi)) / 2;
}

function reduced(D: number, L: number, t: number): number {
  requirePositive('D', D);
  requirePositive('width', L);
  if (!(t >= 0 && Number.isFinite(t))) throw new RangeError(`time must be zero or more, not ${t}`);
  return (D * t) / (L * L);
}
