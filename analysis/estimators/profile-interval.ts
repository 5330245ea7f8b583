import { findRoot } from '../fit/minimise';
import type { Spectrum } from '../spectrum/spectrum';
import { fitNoise, minus2LogLikelihood, type Shape, type TwoParameterFit } from './likelihood';

/** 95 % point of χ² with one degree of freedom. Source: any table of χ², e.g. NIST/SEMATECH e-Handbook 1.3.6.7.4. */
export const CHI2_95_ONE = 3.841458820694124;

export interface ProfileInterval {
  /** D·Δt, µm²; null where the likelihood never falls far enough (no lower or no upper limit). */
  readonly lo: number | null;
  readonly hi: number | null;
  /** σ² at the two ends, µm². */
  readonly sLo: number;
  readonly sHi: number;
}

/**
 * 95 % interval of δ = D·Δt by profile likelihood: {δ : −2lnL(δ, best s) − min ≤ 3.84}. Honest for few data, where
 * the usual ± 1.96 standard errors are too short (Berglund 2010, Phys. Rev. E 82:011917).
 * @param knownS - σ² when it is not fitted, µm².
 * @param room - how far −2lnL may rise above that of `best`; 3.84 unless `best` is not the best of all.
 */
export function profileInterval(
  spectrum: Spectrum,
  a: Shape,
  b: Shape,
  best: TwoParameterFit,
  knownS: number | null,
  room = CHI2_95_ONE,
): ProfileInterval {
  let near = best.s;
  const profile = (delta: number): TwoParameterFit => {
    if (knownS !== null) {
      return { delta, s: knownS, minus2LogL: minus2LogLikelihood(spectrum, a, b, delta, knownS) };
    }
    const fit = fitNoise(spectrum, a, b, delta, near);
    near = fit.s;
    return fit;
  };
  const excess = (logDelta: number) => profile(Math.exp(logDelta)).minus2LogL - best.minus2LogL - room;
  const centre = best.delta > 0 ? Math.log(best.delta) : Math.log(scaleOf(spectrum)) - 12;
  const lo = best.delta > 0 ? edge(excess, centre, -1) : null;
  const sLo = lo === null ? best.s : profile(Math.exp(lo)).s;
  near = best.s;
  const hi = edge(excess, centre, 1);
  const sHi = hi === null ? best.s : profile(Math.exp(hi)).s;
  return { lo: lo === null ? null : Math.exp(lo), hi: hi === null ? null : Math.exp(hi), sLo, sHi };
}

/** Mean power of a coefficient: the size of what is measured, µm². */
function scaleOf(spectrum: Spectrum): number {
  let total = 0;
  for (const group of spectrum.groups) for (const value of group.power) total += value;
  return Math.max(total / spectrum.coefficients, 1e-300);
}

/** Where f crosses zero, going from `centre` in steps of growing size; null when it never does. */
function edge(f: (x: number) => number, centre: number, direction: 1 | -1): number | null {
  let inside = centre;
  let below = Math.min(f(centre), 0);
  let step = 0.05;
  for (let i = 0; i < 60; i++) {
    const outside = centre + direction * step;
    const value = f(outside);
    if (value > 0) {
      return direction === 1
        ? findRoot(f, inside, outside, 1e-10, [below, value])
        : findRoot(f, outside, inside, 1e-10, [value, below]);
    }
    inside = outside;
    below = value;
    step *= 1.6;
    if (step > 60) return null;
  }
  return null;
}
