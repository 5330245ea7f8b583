import { driftSpectrum } from '../spectrum/sine-transform';
import type { Spectrum } from '../spectrum/spectrum';
import { withoutDrift } from '../spectrum/spectrum';
import { fitDelta, fitTwo, type Shape, type TwoParameterFit } from './likelihood';

export interface DriftFit {
  /** Common displacement per frame, µm, one an axis. */
  readonly step: readonly number[];
  /** Its standard error, the same for every axis, µm. */
  readonly se: number;
  readonly fit: TwoParameterFit;
  /** The spectrum with this drift taken off. */
  readonly spectrum: Spectrum;
}

/**
 * Common velocity by weighted least squares for given variances λ_k (methods: v̂ = Σ g_kU_k/λ_k ÷ Σ M g_k²/λ_k); even k
 * carry no drift.
 */
export function driftFor(
  spectrum: Spectrum,
  a: Shape,
  b: Shape,
  fit: TwoParameterFit,
): { step: number[]; se: number } {
  const numerator = new Array<number>(spectrum.dims).fill(0);
  let information = 0;
  for (const [at, group] of spectrum.groups.entries()) {
    const g = driftSpectrum(group.length);
    for (let k = 0; k < group.length; k += 2) {
      const lambda = fit.delta * a[at]![k]! + fit.s * b[at]![k]!;
      information += (group.segments * g[k]! * g[k]!) / lambda;
      for (let axis = 0; axis < spectrum.dims; axis++)
        numerator[axis]! += (g[k]! * group.sums[axis]![k]!) / lambda;
    }
  }
  return { step: numerator.map((value) => value / information), se: 1 / Math.sqrt(information) };
}

/** Joint maximum likelihood of drift, D and σ² (or of drift and D, for a known σ²): a few turns of the two half problems. */
export function fitWithDrift(
  spectrum: Spectrum,
  a: Shape,
  b: Shape,
  start: TwoParameterFit,
  knownS: number | null,
): DriftFit {
  let fit = start;
  let moved = spectrum;
  let drift = driftFor(spectrum, a, b, fit);
  for (let turn = 0; turn < 12; turn++) {
    moved = withoutDrift(spectrum, drift.step);
    const before = fit;
    fit = knownS === null ? fitTwo(moved, a, b, hintOf(fit)) : fitDelta(moved, a, b, knownS);
    if (fit.delta === 0 && fit.s <= 0) break;
    drift = driftFor(spectrum, a, b, fit);
    if (turn > 0 && Math.abs(fit.minus2LogL - before.minus2LogL) < 1e-9) break;
  }
  return { ...drift, fit, spectrum: moved };
}

function hintOf(fit: TwoParameterFit): number | undefined {
  return fit.delta > 0 ? fit.s / fit.delta : undefined;
}
