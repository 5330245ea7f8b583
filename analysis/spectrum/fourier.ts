/** Fourier sums of any length: radix-2 for powers of two, Bluestein's chirp (IEEE Trans. Audio 18:451, 1970) otherwise. */

/** In-place discrete Fourier transform, sign +1 in the exponent, unnormalised; the length must be a power of two. */
export function transformPowerOfTwo(re: Float64Array, im: Float64Array): void {
  const n = re.length;
  if (n !== im.length || (n & (n - 1)) !== 0) throw new RangeError(`length ${n} is not a power of two`);
  for (let i = 1, j = 0; i < n; i++) {
    let bit = n >> 1;
    for (; j & bit; bit >>= 1) j ^= bit;
    j ^= bit;
    if (i < j) {
      [re[i], re[j]] = [re[j]!, re[i]!];
      [im[i], im[j]] = [im[j]!, im[i]!];
    }
  }
  for (let size = 2; size <= n; size *= 2) {
    const half = size / 2;
    const cos = new Float64Array(half);
    const sin = new Float64Array(half);
    for (let k = 0; k < half; k++) {
      cos[k] = Math.cos((2 * Math.PI * k) / size);
      sin[k] = Math.sin((2 * Math.PI * k) / size);
    }
    for (let start = 0; start < n; start += size) {
      for (let k = 0; k < half; k++) {
        const a = start + k;
        const b = a + half;
        const xr = re[b]! * cos[k]! - im[b]! * sin[k]!;
        const xi = re[b]! * sin[k]! + im[b]! * cos[k]!;
        re[b] = re[a]! - xr;
        im[b] = im[a]! - xi;
        re[a] = re[a]! + xr;
        im[a] = im[a]! + xi;
      }
    }
  }
}

/**
 * Sums Σ_τ c_τ cos(π k τ / m) and Σ_τ c_τ sin(π k τ / m) for k = 0 … m, τ = 0 … c.length − 1.
 * @param c - at most m + 1 values.   @param m - at least 1.
 */
export function halfTurnSums(c: Float64Array, m: number): { cos: Float64Array; sin: Float64Array } {
  const cos = new Float64Array(m + 1);
  const sin = new Float64Array(m + 1);
  if (m <= 256) {
    const table = new Float64Array(2 * m);
    for (let i = 0; i < 2 * m; i++) table[i] = Math.cos((Math.PI * i) / m);
    const sine = new Float64Array(2 * m);
    for (let i = 0; i < 2 * m; i++) sine[i] = Math.sin((Math.PI * i) / m);
    for (let k = 0; k <= m; k++) {
      let real = 0;
      let imaginary = 0;
      for (let t = 0, at = 0; t < c.length; t++) {
        real += c[t]! * table[at]!;
        imaginary += c[t]! * sine[at]!;
        at += k;
        if (at >= 2 * m) at -= 2 * m;
      }
      cos[k] = real;
      sin[k] = imaginary;
    }
    return { cos, sin };
  }
  const { re, im } = chirpTransform(c, 2 * m, m + 1);
  cos.set(re);
  sin.set(im);
  return { cos, sin };
}

/** X_k = Σ_t c_t exp(+2πi k t / n) for k = 0 … count − 1. */
function chirpTransform(c: Float64Array, n: number, count: number): { re: Float64Array; im: Float64Array } {
  const needed = c.length + count - 1;
  let size = 1;
  while (size < needed) size *= 2;
  // k t = (k² + t² − (k − t)²)/2; the square is reduced modulo 2n first, or its rounding would grow with k².
  const phase = (j: number) => (Math.PI * ((j * j) % (2 * n))) / n;
  const ar = new Float64Array(size);
  const ai = new Float64Array(size);
  for (let t = 0; t < c.length; t++) {
    ar[t] = c[t]! * Math.cos(phase(t));
    ai[t] = c[t]! * Math.sin(phase(t));
  }
  const br = new Float64Array(size);
  const bi = new Float64Array(size);
  for (let j = -(c.length - 1); j < count; j++) {
    const at = j < 0 ? j + size : j;
    br[at] = Math.cos(phase(Math.abs(j)));
    bi[at] = -Math.sin(phase(Math.abs(j)));
  }
  transformPowerOfTwo(ar, ai);
  transformPowerOfTwo(br, bi);
  for (let i = 0; i < size; i++) {
    const re = ar[i]! * br[i]! - ai[i]! * bi[i]!;
    const im = ar[i]! * bi[i]! + ai[i]! * br[i]!;
    // Conjugated, so that the same transform serves as its own inverse (with a conjugation behind it).
    ar[i] = re;
    ai[i] = -im;
  }
  transformPowerOfTwo(ar, ai);
  const re = new Float64Array(count);
  const im = new Float64Array(count);
  for (let k = 0; k < count; k++) {
    const xr = ar[k]! / size;
    const xi = -ai[k]! / size;
    const cos = Math.cos(phase(k));
    const sin = Math.sin(phase(k));
    re[k] = xr * cos - xi * sin;
    im[k] = xr * sin + xi * cos;
  }
  return { re, im };
}
