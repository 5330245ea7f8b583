import { halfTurnSums } from './fourier';

/**
 * Orthonormal sine transform (DST-I): û_k = √(2/(N+1)) Σ_j x_j sin(πkj/(N+1)), k, j = 1 … N. It diagonalises the
 * tridiagonal covariance of Brownian displacements with localisation error and blur exactly.
 * @param x - N ≥ 1 displacements.   @returns N coefficients; element k − 1 is û_k.
 * Source: Michalet & Berglund 2012, Phys. Rev. E 85:061916; from memory, checked against dense matrices in the tests.
 */
export function sineTransform(x: Float64Array): Float64Array {
  const n = x.length;
  const shifted = new Float64Array(n + 1);
  shifted.set(x, 1);
  const { sin } = halfTurnSums(shifted, n + 1);
  const scale = Math.sqrt(2 / (n + 1));
  return Float64Array.from({ length: n }, (_, k) => scale * sin[k + 1]!);
}

/** b_k = 2 − 2cos(πk/(N+1)): the variance of û_k that unit white localisation error adds. @returns N values. */
export function noiseSpectrum(n: number): Float64Array {
  // As 4 sin²: near k = 0 the difference 2 − 2cos loses digits.
  return Float64Array.from({ length: n }, (_, k) => 4 * Math.sin((Math.PI * (k + 1)) / (2 * (n + 1))) ** 2);
}

/** g_k: the sine transform of a constant 1, √(2/(N+1))·cot(πk/(2(N+1))) for odd k, 0 for even k. @returns N values. */
export function driftSpectrum(n: number): Float64Array {
  const scale = Math.sqrt(2 / (n + 1));
  return Float64Array.from({ length: n }, (_, at) => {
    const k = at + 1;
    return k % 2 === 0 ? 0 : scale / Math.tan((Math.PI * k) / (2 * (n + 1)));
  });
}

/**
 * Exact variance of each û_k under stationary displacements with autocovariance γ (debiased Whittle):
 * a_k = γ_0 + (2/(N+1)) Σ_τ γ_τ [(N−τ)cos(θ_kτ) + sin((τ+1)θ_k)/sin θ_k], τ = 1 … N−1, θ_k = πk/(N+1).
 * @param gamma - N values, lag 0 first.   @returns N values.
 * Principle: Sykulski et al. 2019, Biometrika 106:251; this form checked against dense matrices in the tests.
 */
export function stationarySpectrum(gamma: Float64Array): Float64Array {
  const n = gamma.length;
  const m = n + 1;
  const weighted = new Float64Array(n);
  const shifted = new Float64Array(n + 1);
  for (let t = 1; t < n; t++) {
    weighted[t] = (n - t) * gamma[t]!;
    shifted[t + 1] = gamma[t]!;
  }
  const { cos } = halfTurnSums(weighted, m);
  const { sin } = halfTurnSums(shifted, m);
  return Float64Array.from({ length: n }, (_, at) => {
    const k = at + 1;
    return gamma[0]! + (2 / m) * (cos[k]! + sin[k]! / Math.sin((Math.PI * k) / m));
  });
}
