import { CHI2_95_ONE } from '../estimators/profile-interval';
import { fitDelta, fitTwo, type Shape, type TwoParameterFit } from '../estimators/likelihood';
import { findRoot, minimise } from '../fit/minimise';
import { anomalousMsd, confinedMsd, displacementCovariance, type MsdFunction } from '../spectrum/models';
import { driftSpectrum, stationarySpectrum } from '../spectrum/sine-transform';
import type { Spectrum } from '../spectrum/spectrum';
import type { Estimate } from '../types';

/** A model with one shape parameter beside D and σ², fitted to the same spectrum as the free model. */
export interface AlternativeFit {
  /** α, q = κΔt, or ω (variance of the velocities per axis, in units DΔt). */
  readonly shape: number;
  readonly fit: TwoParameterFit;
  /** −2 ln likelihood ratio against the free model, divided by the dispersion, at least 0. */
  readonly statistic: number;
}

export interface AnomalousFit extends AlternativeFit {
  readonly alpha: Estimate;
  /** −2lnL at α = 0.5 and at 1.5, less the minimum, divided by the dispersion. */
  readonly statisticAtHalf: number;
  readonly statisticAtOneAndHalf: number;
}

export interface Alternatives {
  readonly anomalous: AnomalousFit;
  readonly confined: AlternativeFit;
  /** Individual velocities; null for a single track, where they are a common drift. */
  readonly individual: AlternativeFit | null;
}

export interface AlternativeInput {
  readonly spectrum: Spectrum;
  readonly b: Shape;
  readonly free: TwoParameterFit;
  readonly freeShape: Shape;
  readonly knownS: number | null;
  readonly blurFraction: number;
  readonly dispersion: number;
  readonly tracks: number;
}

export const ALPHA_LOWEST = 0.05;
export const ALPHA_HIGHEST = 1.95;

/** Fits what free diffusion is held against: anomalous, confined and (for several tracks) individually directed motion. */
export function fitAlternatives(input: AlternativeInput): Alternatives {
  const longest = Math.max(...input.spectrum.groups.map((group) => group.length));
  return {
    anomalous: fitAnomalous(input),
    confined: fitShape(input, logGrid(0.3 / longest, 6, 16), (q) =>
      shapeOf(input, confinedMsd(q, input.blurFraction)),
    ),
    individual:
      input.tracks >= 2
        ? fitShape(input, logGrid(0.02 / longest, 30, 14), (omega) => velocityShape(input, omega))
        : null,
  };
}

function fitAnomalous(input: AlternativeInput): AnomalousFit {
  const at = memory((alpha: number) =>
    fitShapeOnce(input, shapeOf(input, anomalousMsd(alpha, input.blurFraction))),
  );
  const f = (alpha: number) => at(alpha).minus2LogL;
  const grid = Array.from(
    { length: 20 },
    (_, i) => ALPHA_LOWEST + (0.1 * i * (ALPHA_HIGHEST - ALPHA_LOWEST)) / 1.9,
  );
  const best = polish(f, grid, 1e-7);
  const relative = (alpha: number) => Math.max(0, f(alpha) - best.value) / input.dispersion;
  const beyond = (alpha: number) => relative(alpha) - CHI2_95_ONE;
  return {
    shape: best.x,
    fit: at(best.x),
    statistic: Math.max(0, input.free.minus2LogL - best.value) / input.dispersion,
    alpha: {
      value: best.x,
      lo: beyond(ALPHA_LOWEST) > 0 ? findRoot(beyond, ALPHA_LOWEST, best.x, 1e-6) : null,
      hi: beyond(ALPHA_HIGHEST) > 0 ? findRoot(beyond, best.x, ALPHA_HIGHEST, 1e-6) : null,
    },
    statisticAtHalf: relative(0.5),
    statisticAtOneAndHalf: relative(1.5),
  };
}

function fitShape(
  input: AlternativeInput,
  grid: readonly number[],
  shape: (x: number) => Shape,
): AlternativeFit {
  const f = memory((logX: number) => fitShapeOnce(input, shape(Math.exp(logX))));
  const best = polish((x) => f(x).minus2LogL, grid.map(Math.log), 1e-6);
  return {
    shape: Math.exp(best.x),
    fit: f(best.x),
    statistic: Math.max(0, input.free.minus2LogL - best.value) / input.dispersion,
  };
}

function fitShapeOnce(input: AlternativeInput, a: Shape): TwoParameterFit {
  if (input.knownS !== null) return fitDelta(input.spectrum, a, input.b, input.knownS);
  return fitTwo(
    input.spectrum,
    a,
    input.b,
    input.free.delta > 0 ? input.free.s / input.free.delta : undefined,
  );
}

function shapeOf(input: AlternativeInput, m: MsdFunction): Shape {
  return input.spectrum.groups.map((group) => stationarySpectrum(displacementCovariance(m, group.length)));
}

function velocityShape(input: AlternativeInput, omega: number): Shape {
  return input.spectrum.groups.map((group, at) => {
    const g = driftSpectrum(group.length);
    return input.freeShape[at]!.map((value, k) => value + omega * g[k]! * g[k]!);
  });
}

function logGrid(from: number, to: number, count: number): number[] {
  return Array.from({ length: count }, (_, i) => from * (to / from) ** (i / (count - 1)));
}

function polish(
  f: (x: number) => number,
  grid: readonly number[],
  tolerance: number,
): { x: number; value: number } {
  const values = grid.map(f);
  let best = 0;
  for (let i = 1; i < grid.length; i++) if (values[i]! < values[best]!) best = i;
  const left = grid[Math.max(0, best - 1)]!;
  const right = grid[Math.min(grid.length - 1, best + 1)]!;
  const found = minimise(f, left, right, { guess: grid[best]!, tolerance });
  return found.value <= values[best]! ? found : { x: grid[best]!, value: values[best]! };
}

/** Remembers the fits of one search: the interval asks for points that the search has visited. */
function memory<T>(f: (x: number) => T): (x: number) => T {
  const known = new Map<number, T>();
  return (x) => {
    const before = known.get(x);
    if (before !== undefined) return before;
    const value = f(x);
    known.set(x, value);
    return value;
  };
}
