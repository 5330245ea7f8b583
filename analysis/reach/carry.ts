import type { Estimate } from '../types';

/**
 * Carries an estimate and its interval through a monotone function: coverage stays what it was, which ± a multiple of an
 * error does not give. An end where the function is not finite stays open.
 * @param way - whether the function grows or falls with its argument; where it falls the ends change places.
 */
export function carried(from: Estimate, way: 'grows' | 'falls', f: (value: number) => number): Estimate {
  const end = (value: number | null) => {
    if (value === null) return null;
    const result = f(value);
    return Number.isFinite(result) ? result : null;
  };
  const [lo, hi] = way === 'grows' ? [from.lo, from.hi] : [from.hi, from.lo];
  return { value: f(from.value), lo: end(lo), hi: end(hi) };
}
