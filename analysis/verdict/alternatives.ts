import { CHI2_95_ONE } from '../estimators/profile-interval';
import { fitDelta, fitTwo, type Shape, type TwoParameterFit } from '../estimators/likelihood';
import { findRoot, minimise } from '../fit/minimise';
import {
  anomalousMsd,
  boxMsd,
  confinedMsd,
  displacementCovariance,
  type MsdFunction,
} from '../spectrum/models';
import { driftSpectrum, stationarySpectrum } from '../spectrum/sine-transform';
import type { Spectrum } from '../spectrum/spectrum';
import type { Estimate } from '../types';
import type { ShapedModel } from './region';

/** A model with one shape parameter beside D and σ², fitted to the same spectrum as the free model. */
export interface AlternativeFit {
  /** α, q = κΔt, or ω (variance of the velocities per axis, in units DΔt). */
  readonly shape: number;
  readonly fit: TwoParameterFit;
  /** −2 ln likelihood ratio against the free model, divided by the dispersion, at least 0. */
  readonly statistic: number;
  /** For intervals; its parameter is α, or the logarithm of q or ω. */
  readonly model: ShapedModel;
}

export interface AnomalousFit extends AlternativeFit {
  readonly alpha: Estimate;
  /** −2lnL at α = 0.5 and at 1.5, less the minimum, divided by the dispersion. */
  readonly statisticAtHalf: number;
  readonly statisticAtOneAndHalf: number;
}

export interface Alternatives {
  readonly anomalous: AnomalousFit;
  /** Harmonic well: the confinement that the verdict is found with. */
  readonly confined: AlternativeFit;
  /** Reflecting walls, whose spectrum nearly equals that of a well: fitted when a size is to be stated. */
  readonly walls: () => AlternativeFit;
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
    // For the same size q is π²/12 of that of a well.
    walls: () =>
      fitShape(input, logGrid(0.25 / longest, 5, 16), (q) => shapeOf(input, boxMsd(q, input.blurFraction))),
    individual:
      input.tracks >= 2
        ? fitShape(input, logGrid(0.02 / longest, 30, 14), (omega) => velocityShape(input, omega))
        : null,
  };
}

function fitAnomalous(input: AlternativeInput): AnomalousFit {
  const grid = Array.from(
    { length: 20 },
    (_, i) => ALPHA_LOWEST + (0.1 * i * (ALPHA_HIGHEST - ALPHA_LOWEST)) / 1.9,
  );
  const found = fitOver(input, grid, 1e-7, (alpha) =>
    shapeOf(input, anomalousMsd(alpha, input.blurFraction)),
  );
  const f = (alpha: number) => found.model.fitAt(alpha).minus2LogL;
  const { best } = found.model;
  const relative = (alpha: number) => Math.max(0, f(alpha) - found.fit.minus2LogL) / input.dispersion;
  const beyond = (alpha: number) => relative(alpha) - CHI2_95_ONE;
  return {
    ...found,
    shape: best,
    alpha: {
      value: best,
      lo: beyond(ALPHA_LOWEST) > 0 ? findRoot(beyond, ALPHA_LOWEST, best, 1e-6) : null,
      hi: beyond(ALPHA_HIGHEST) > 0 ? findRoot(beyond, best, ALPHA_HIGHEST, 1e-6) : null,
    },
    statisticAtHalf: relative(0.5),
    statisticAtOneAndHalf: relative(1.5),
  };
}

/** Searches over the logarithm of a positive parameter. */
function fitShape(
  input: AlternativeInput,
  grid: readonly number[],
  shape: (x: number) => Shape,
): AlternativeFit {
  const found = fitOver(input, grid.map(Math.log), 1e-6, (logX) => shape(Math.exp(logX)));
  return { ...found, shape: Math.exp(found.model.best) };
}

function fitOver(
  input: AlternativeInput,
  grid: readonly number[],
  tolerance: number,
  shape: (p: number) => Shape,
): Omit<AlternativeFit, 'shape'> {
  const shapeAt = memory(shape);
  const fitAt = memory((p: number) => fitShapeOnce(input, shapeAt(p)));
  const best = polish((p) => fitAt(p).minus2LogL, grid, tolerance);
  const model: ShapedModel = {
    spectrum: input.spectrum,
    b: input.b,
    knownS: input.knownS,
    dispersion: input.dispersion,
    shapeAt,
    fitAt,
    best: best.x,
    lowest: grid[0]!,
    highest: grid.at(-1)!,
  };
  return {
    fit: fitAt(best.x),
    statistic: Math.max(0, input.free.minus2LogL - best.value) / input.dispersion,
    model,
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

/** Remembers the answers of one search: the interval asks for points that the search has visited. */
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
