/**
 * Seeded random numbers: xoshiro128** 1.1 (Blackman & Vigna, "Scrambled linear pseudorandom number generators",
 * ACM Trans. Math. Softw. 47:36, 2021; public-domain reference code, from memory), seeded through SplitMix32.
 * Never Math.random: a result, a demo and a failing test must come out the same again.
 */
export interface Random {
  /** Uniform in [0, 1), 53 bits. */
  uniform(): number;
  /** Normal with mean 0 and variance 1 (polar method of Marsaglia & Bray, SIAM Rev. 6:260, 1964). */
  gaussian(): number;
  /** Whole number in [0, below). */
  whole(below: number): number;
}

/** @param seed - any 32-bit number. */
export function seededRandom(seed: number): Random {
  let mix = seed >>> 0;
  const split = () => {
    mix = (mix + 0x9e3779b9) >>> 0;
    let z = mix;
    z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
    z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
    return (z ^ (z >>> 16)) >>> 0;
  };
  let [a, b, c, d] = [split(), split(), split(), split()];
  const rotate = (x: number, k: number) => ((x << k) | (x >>> (32 - k))) >>> 0;
  const next = () => {
    const result = Math.imul(rotate(Math.imul(b, 5) >>> 0, 7), 9) >>> 0;
    const t = (b << 9) >>> 0;
    c = (c ^ a) >>> 0;
    d = (d ^ b) >>> 0;
    b = (b ^ c) >>> 0;
    a = (a ^ d) >>> 0;
    c = (c ^ t) >>> 0;
    d = rotate(d, 11);
    return result;
  };
  const uniform = () => ((next() >>> 5) * 67_108_864 + (next() >>> 6)) / 9_007_199_254_740_992;
  let spare: number | null = null;
  const gaussian = () => {
    if (spare !== null) {
      const kept = spare;
      spare = null;
      return kept;
    }
    for (;;) {
      const x = 2 * uniform() - 1;
      const y = 2 * uniform() - 1;
      const r = x * x + y * y;
      if (r >= 1 || r === 0) continue;
      const scale = Math.sqrt((-2 * Math.log(r)) / r);
      spare = y * scale;
      return x * scale;
    }
  };
  return { uniform, gaussian, whole: (below) => Math.floor(uniform() * below) };
}
