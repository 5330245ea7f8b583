import type { Random } from '../random';
import { transformPowerOfTwo } from '../spectrum/fourier';

/**
 * Stationary Gaussian series with a given autocovariance, exact, by circulant embedding.
 * @param gamma - autocovariance, lag 0 first; as many values as the series is long.
 * @returns a function that draws one series after another.
 * @throws RangeError when the embedding is not positive (the series is then to be drawn longer).
 * Source: Davies & Harte 1987, Biometrika 74:95 (from memory; checked in the tests).
 */
export function stationarySeries(gamma: Float64Array, random: Random): () => Float64Array {
  const length = gamma.length;
  let size = 2;
  while (size < 2 * length) size *= 2;
  const re = new Float64Array(size);
  const im = new Float64Array(size);
  for (let lag = 0; lag < length; lag++) re[lag] = gamma[lag]!;
  for (let lag = 1; lag < length; lag++) re[size - lag] = gamma[lag]!;
  transformPowerOfTwo(re, im);
  const scale = re.map((value) => {
    if (value < -1e-9 * gamma[0]!) throw new RangeError('the circulant embedding is not positive');
    return Math.sqrt(Math.max(0, value) / size);
  });
  let spare: Float64Array | null = null;
  return () => {
    if (spare) {
      const kept = spare;
      spare = null;
      return kept;
    }
    const a = new Float64Array(size);
    const b = new Float64Array(size);
    for (let k = 0; k < size; k++) {
      a[k] = scale[k]! * random.gaussian();
      b[k] = scale[k]! * random.gaussian();
    }
    transformPowerOfTwo(a, b);
    spare = b.slice(0, length);
    return a.slice(0, length);
  };
}
