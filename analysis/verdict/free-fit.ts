import { fitWithDrift, type DriftFit } from '../estimators/drift';
import {
  fitDelta,
  fitTwo,
  noiseShape,
  standardErrors,
  type Shape,
  type TwoParameterFit,
} from '../estimators/likelihood';
import { profileInterval, type ProfileInterval } from '../estimators/profile-interval';
import { displacementCovariance, freeMsd } from '../spectrum/models';
import { stationarySpectrum } from '../spectrum/sine-transform';
import type { Spectrum } from '../spectrum/spectrum';
import type { AnalysisSettings } from '../types';

/** The free model with and without a common drift, and how far the drift can be believed. */
export interface FreeFit {
  readonly dims: number;
  /** Shapes of the spectrum: diffusion a, localisation error b. */
  readonly a: Shape;
  readonly b: Shape;
  /** σ² that was given, µm²; null when it is fitted. */
  readonly knownS: number | null;
  readonly still: TwoParameterFit;
  /** Null when there are too few displacements to tell a drift from diffusion. */
  readonly drifting: DriftFit | null;
  /** Relative standard error of D of the still fit; Infinity when it has none. */
  readonly relativeError: number;
  /** Dispersion φ ≥ 1 by which every test statistic is divided (heterogeneous or heavy-tailed data). */
  readonly dispersion: number;
  /** Corrected drift statistic and its threshold. */
  readonly driftStatistic: number;
  readonly driftThreshold: number;
  readonly driftSignificant: boolean;
  /** Standard error of the drift per axis and frame, µm: the stage's own random walk makes it wider. */
  readonly driftError: number;
  /** Whether the drift is taken off in what follows. */
  readonly driftRemoved: boolean;
  /** Likelihood-ratio statistic of "some motion" against "localisation error only", divided by φ. */
  readonly motionStatistic: number;
}

/** χ² with 1, 2, 3 degrees of freedom, 97.5 %. Source: NIST/SEMATECH e-Handbook 1.3.6.7.4. */
export const CHI2_975 = [5.023886, 7.377759, 9.348404] as const;
/** A drift takes one number an axis away from D and σ²; of fewer displacements nothing would be left to judge by. */
const DRIFT_FROM = 4;
/** Fewer coefficients than this say too little about their own spread. */
const DISPERSION_FROM = 200;

/** @param stage - variance of the drift per axis and frame, µm², that the way of a shaking stage adds. */
export function fitFree(
  spectrum: Spectrum,
  blurFraction: number,
  settings: AnalysisSettings,
  stage = 0,
): FreeFit {
  const a = freeShape(spectrum, blurFraction);
  const b = noiseShape(spectrum);
  const single = spectrum.groups.every((group) => group.length === 1);
  // Two-point tracks cannot tell D from σ²: σ is then what was given, or zero (said in a warning).
  const knownS = settings.sigma !== null ? settings.sigma ** 2 : single ? 0 : null;
  const still = knownS === null ? fitTwo(spectrum, a, b) : fitDelta(spectrum, a, b, knownS);
  const drifting = spectrum.displacements >= DRIFT_FROM ? fitWithDrift(spectrum, a, b, still, knownS) : null;
  const relativeError = relativeErrorOf(spectrum, a, b, still, knownS);
  const dispersion = dispersionOf(spectrum, a, b, still);
  const raw = drifting ? Math.max(0, still.minus2LogL - drifting.fit.minus2LogL) : 0;
  const own = drifting ? drifting.se ** 2 : 0;
  const widening = own > 0 ? own / (own + stage) : 1;
  const driftStatistic = (raw * widening) / (1 + 1.8 * Math.min(relativeError, 1) ** 2) / dispersion;
  const driftThreshold = CHI2_975[spectrum.dims - 1]!;
  const driftSignificant = driftStatistic > driftThreshold;
  const free = {
    dims: spectrum.dims,
    a,
    b,
    knownS,
    still,
    drifting,
    relativeError,
    dispersion,
    driftStatistic,
    driftThreshold,
    driftSignificant,
    driftError: Math.sqrt(own + stage),
    driftRemoved: false,
    motionStatistic: 0,
  };
  return withDriftDecided(spectrum, free, driftSignificant, settings);
}

/** The same fit with the drift taken off or not, as a test on other spectra of the same data found. */
export function withDriftDecided(
  spectrum: Spectrum,
  free: FreeFit,
  significant: boolean,
  settings: AnalysisSettings,
): FreeFit {
  const asked = settings.drift === 'remove' || (settings.drift === 'auto' && significant);
  const removed = asked ? free.drifting : null;
  const { spectrum: used, fit } = removed ?? { spectrum, fit: free.still };
  return {
    ...free,
    driftRemoved: removed !== null,
    motionStatistic: motionStatistic(used, free.a, free.b, fit, free.knownS) / free.dispersion,
  };
}

/** The spectrum and the fit that everything after the drift decision rests on. */
export function chosen(spectrum: Spectrum, free: FreeFit): { spectrum: Spectrum; fit: TwoParameterFit } {
  return free.driftRemoved && free.drifting
    ? { spectrum: free.drifting.spectrum, fit: free.drifting.fit }
    : { spectrum, fit: free.still };
}

/** Interval of D·Δt for the chosen fit. */
export function freeInterval(spectrum: Spectrum, free: FreeFit): ProfileInterval {
  const used = chosen(spectrum, free);
  return profileInterval(used.spectrum, free.a, free.b, used.fit, free.knownS);
}

export function freeShape(spectrum: Spectrum, blurFraction: number): Shape {
  return spectrum.groups.map((group) =>
    // Only two lags are not zero, so the exact spectrum is a_k = 2 − 2R·b_k with R = e/6.
    group.length <= 2
      ? stationarySpectrum(displacementCovariance(freeMsd(blurFraction), group.length))
      : tridiagonalShape(group.length, blurFraction),
  );
}

function tridiagonalShape(length: number, blurFraction: number): Float64Array {
  return Float64Array.from({ length }, (_, at) => {
    const b = 4 * Math.sin((Math.PI * (at + 1)) / (2 * (length + 1))) ** 2;
    return 2 - (blurFraction / 3) * b;
  });
}

function relativeErrorOf(
  spectrum: Spectrum,
  a: Shape,
  b: Shape,
  fit: TwoParameterFit,
  knownS: number | null,
): number {
  if (!(fit.delta > 0)) return Infinity;
  if (knownS === null) return (standardErrors(spectrum, a, b, fit)?.delta ?? Infinity) / fit.delta;
  let information = 0;
  for (const [at, group] of spectrum.groups.entries()) {
    const n = group.segments * spectrum.dims;
    for (let k = 0; k < group.length; k++) {
      const lambda = fit.delta * a[at]![k]! + fit.s * b[at]![k]!;
      information += 0.5 * n * (a[at]![k]! / lambda) ** 2;
    }
  }
  return 1 / Math.sqrt(information) / fit.delta;
}

/**
 * φ = Σ(S4_k/λ_k²)/(3Σn_k): 1 for Gaussian displacements of one D, more for mixtures and heavy tails. Used only when it is
 * beyond what chance explains.
 */
function dispersionOf(spectrum: Spectrum, a: Shape, b: Shape, fit: TwoParameterFit): number {
  let sum = 0;
  for (const [at, group] of spectrum.groups.entries()) {
    for (let k = 0; k < group.length; k++) {
      const lambda = fit.delta * a[at]![k]! + fit.s * b[at]![k]!;
      sum += group.fourth[k]! / (lambda * lambda);
    }
  }
  const phi = sum / (3 * spectrum.coefficients);
  const chance = 1 + (2 * Math.sqrt(96 / spectrum.coefficients)) / 3;
  return spectrum.coefficients > DISPERSION_FROM && phi > chance && Number.isFinite(phi) ? phi : 1;
}

function motionStatistic(
  spectrum: Spectrum,
  a: Shape,
  b: Shape,
  fit: TwoParameterFit,
  knownS: number | null,
): number {
  if (!(fit.delta > 0)) return 0;
  if (knownS === 0) return Infinity;
  const still = knownS === null ? stillLikelihood(spectrum, b) : stillWithKnown(spectrum, b, knownS);
  return Math.max(0, still - fit.minus2LogL);
}

function stillLikelihood(spectrum: Spectrum, b: Shape): number {
  let logs = 0;
  let weighted = 0;
  for (const [at, group] of spectrum.groups.entries()) {
    for (let k = 0; k < group.length; k++) {
      logs += group.segments * spectrum.dims * Math.log(b[at]![k]!);
      weighted += group.power[k]! / b[at]![k]!;
    }
  }
  return logs + spectrum.coefficients * (Math.log(weighted / spectrum.coefficients) + 1);
}

function stillWithKnown(spectrum: Spectrum, b: Shape, s: number): number {
  let total = 0;
  for (const [at, group] of spectrum.groups.entries()) {
    for (let k = 0; k < group.length; k++) {
      const lambda = s * b[at]![k]!;
      total += group.segments * spectrum.dims * Math.log(lambda) + group.power[k]! / lambda;
    }
  }
  return total;
}
