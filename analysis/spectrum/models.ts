/**
 * Mean squared displacement per axis of positions averaged over the exposure, in units D = Δt = 1 and without
 * localisation error: m(n), n ≥ 1; m(0) = 0. e is the exposure as a fraction of the frame interval.
 */
export type MsdFunction = (n: number) => number;

/** Free diffusion: m = 2n − 2e/3. Source: Berglund 2010, Phys. Rev. E 82:011917 (from memory, checked numerically). */
export const freeMsd =
  (e: number): MsdFunction =>
  (n) =>
    n === 0 ? 0 : 2 * n - (2 * e) / 3;

/**
 * Fractional Brownian motion with MSD 2t^α per axis. Source: Mandelbrot & Van Ness 1968, SIAM Rev. 10:422; with blur
 * as in Backlund, Joyner & Moerner 2015, Phys. Rev. E 91:062716 (from memory, checked by quadrature).
 */
export function anomalousMsd(alpha: number, e: number): MsdFunction {
  if (e < 1e-6) return (n) => (n === 0 ? 0 : 2 * n ** alpha);
  const p = alpha + 2;
  const norm = (alpha + 1) * p;
  return (n) => {
    if (n === 0) return 0;
    // For n ≫ e the bracket is a tiny difference of large numbers: take its series in e/n instead.
    const bracket =
      n > 200 * e
        ? e * e * n ** alpha * (p * (p - 1) + (p * (p - 1) * (p - 2) * (p - 3) * (e / n) ** 2) / 12)
        : (n + e) ** p + Math.abs(n - e) ** p - 2 * n ** p;
    return (2 * bracket) / (norm * e * e) - (4 * e ** alpha) / norm;
  };
}

/**
 * Harmonic confinement (Ornstein–Uhlenbeck) with q = κΔt: m = (2/q)[A − B e^(−qn)]. A reflecting box has the same spread
 * when its width is √12 times the standard deviation √(D/κ), but rises a fifth faster at first.
 */
export function confinedMsd(q: number, e: number): MsdFunction {
  const y = q * e;
  const a = y < 0.01 ? 1 - y / 3 + (y * y) / 12 : (2 * (y - 1 + Math.exp(-y))) / (y * y);
  // B e^(−qn) with B = 2(cosh y − 1)/y², written so that a large y does not overflow.
  const tail = (n: number) =>
    y < 0.01
      ? (1 + (y * y) / 12) * Math.exp(-q * n)
      : (Math.exp(y - q * n) + Math.exp(-y - q * n) - 2 * Math.exp(-q * n)) / (y * y);
  return (n) => (n === 0 ? 0 : (2 / q) * (a - tail(n)));
}

/** Modes of a box that are summed; what is left out is below 1e-5 of its spread. */
const BOX_MODES = 24;

/**
 * Reflecting walls: a box is a sum of harmonic wells with rates j²q, j odd, and shares 8/(π²j²) of the diffusion;
 * q = π²DΔt/L². Source: Kusumi, Sako & Yamamoto 1993, Biophys. J. 65:2021 (its MSD, mode by mode with the blur of each).
 */
export function boxMsd(q: number, e: number): MsdFunction {
  const modes = Array.from({ length: BOX_MODES }, (_, i) => {
    const j2 = (2 * i + 1) ** 2;
    return { share: 8 / (Math.PI ** 2 * j2), msd: confinedMsd(q * j2, e) };
  });
  return (n) => modes.reduce((sum, mode) => sum + mode.share * mode.msd(n), 0);
}

/** Autocovariance of displacements, lag 0 to length − 1: γ_0 = m(1), γ_τ = ½[m(τ+1) + m(τ−1) − 2m(τ)]. */
export function displacementCovariance(m: MsdFunction, length: number): Float64Array {
  const values = Float64Array.from({ length: length + 1 }, (_, n) => m(n));
  return Float64Array.from({ length }, (_, t) =>
    t === 0 ? values[1]! : 0.5 * (values[t + 1]! + values[t - 1]! - 2 * values[t]!),
  );
}
