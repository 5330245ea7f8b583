import { standardErrors, type TwoParameterFit } from '../estimators/likelihood';
import { anomalousMsd, boxMsd, confinedMsd, freeMsd, type MsdFunction } from '../spectrum/models';
import type { Track } from '../input/prepare';
import type { Spectrum } from '../spectrum/spectrum';
import type { Confinement, Estimate } from '../types';
import type { AlternativeFit, Alternatives } from './alternatives';
import type { Decision } from './decide';
import { chosen, freeInterval, type FreeFit } from './free-fit';
import { rangeOver, regionOf, type Region } from './region';
import { wallOrWell } from './wall-or-well';

/** What a result states for its verdict: numbers of the model that the verdict chose, and of no other. */
export interface Reported {
  readonly D: Estimate | null;
  readonly sigmaSquared: { readonly value: number; readonly se: number | null };
  readonly K: Estimate | null;
  readonly confinement: Confinement | null;
  /** Root-mean-square speed of tracks that run in directions of their own, µm/s. */
  readonly individualSpeed: Estimate | null;
  /** Model of the MSD per axis, µm², against the lag in frames; without a common drift. */
  readonly curve: MsdFunction;
  readonly curveLo: MsdFunction;
  readonly curveHi: MsdFunction;
}

export interface ReportFacts {
  readonly spectrum: Spectrum;
  readonly free: FreeFit;
  readonly alternatives: Alternatives | null;
  readonly decision: Decision;
  readonly interval: number;
  readonly blurFraction: number;
  /** Positions for what a confinement looks like; null when a drift or shared motion is in them. */
  readonly positions: readonly Track[] | null;
}

/**
 * D, σ² and what else belongs to the verdict. Free, drifting and undecided data: the free model on runs of measured
 * frames. Others: their own model, on the series that the verdict was found with; every interval is a profile likelihood.
 */
export function report(facts: ReportFacts): Reported {
  const { decision, alternatives } = facts;
  const rival = decision.ground === 'departs' ? decision.rivals[0] : undefined;
  if (alternatives && rival === 'confined') return reportConfined(facts, alternatives);
  if (alternatives && rival === 'anomalous') return reportAnomalous(facts, alternatives.anomalous);
  if (alternatives?.individual && rival === 'individual')
    return reportIndividual(facts, alternatives.individual);
  return reportFree(facts);
}

const NOTHING_ELSE = { K: null, confinement: null, individualSpeed: null };

function reportFree({ spectrum, free, decision, interval, blurFraction }: ReportFacts): Reported {
  const used = chosen(spectrum, free);
  const ends = freeInterval(spectrum, free);
  const errors = free.knownS === null ? standardErrors(used.spectrum, free.a, free.b, used.fit) : null;
  const resolved = decision.ground !== 'no-motion' && used.fit.delta > 0;
  const curve = (delta: number, s: number) => curveOf(freeMsd(blurFraction), delta, s);
  return {
    ...NOTHING_ELSE,
    D: resolved
      ? {
          value: used.fit.delta / interval,
          lo: ends.lo === null ? null : ends.lo / interval,
          hi: ends.hi === null ? null : ends.hi / interval,
        }
      : null,
    sigmaSquared: { value: used.fit.s, se: errors?.s ?? null },
    curve: curve(used.fit.delta, used.fit.s),
    curveLo: curve(ends.lo ?? 0, ends.lo === null ? used.fit.s : ends.sLo),
    curveHi: ends.hi === null ? curve(used.fit.delta, used.fit.s) : curve(ends.hi, ends.sHi),
  };
}

/**
 * Walls and a well of the same size give nearly the same spectrum but D a fifth apart, so the positions decide which is
 * stated. Where they cannot, walls are stated and the intervals span both.
 */
function reportConfined(facts: ReportFacts, alternatives: Alternatives): Reported {
  const { interval, blurFraction } = facts;
  const well = confinementOf(alternatives.confined, (delta, logQ) => Math.sqrt(delta / Math.exp(logQ)));
  const seen = facts.positions
    ? wallOrWell(facts.positions, well.spread.value, 1 / alternatives.confined.shape)
    : { boundary: 'unclear' as const, kurtosis: null };
  const stated =
    seen.boundary === 'well'
      ? well
      : confinementOf(
          alternatives.walls(),
          (delta, logQ) => Math.PI * Math.sqrt(delta / Math.exp(logQ) / 12),
        );
  const both = seen.boundary === 'unclear' ? [stated, well] : [stated];
  const scaled = (factor: number) =>
    scale(
      span(
        stated.spread,
        both.map((one) => one.spread),
      ),
      factor,
    );
  const delta = span(
    stated.delta,
    both.map((one) => one.delta),
  );
  // Both relax, in the end, at this rate.
  const rate = (logQ: number | null) => (logQ === null ? null : interval / Math.exp(logQ));
  const model = seen.boundary === 'well' ? confinedMsd : boxMsd;
  return {
    ...NOTHING_ELSE,
    ...shared(facts, stated.found, stated.region, (logQ) => model(Math.exp(logQ), blurFraction)),
    D: stated.found.fit.delta > 0 ? scale(delta, 1 / interval) : null,
    confinement: {
      ...seen,
      width: scaled(Math.sqrt(12)),
      circleRadius: scaled(2),
      sphereRadius: scaled(Math.sqrt(5)),
      relaxationTime: {
        value: interval / Math.exp(stated.found.model.best),
        lo: rate(stated.region.hi),
        hi: rate(stated.region.lo),
      },
    },
  };
}

/** @param spreadOf - standard deviation of the positions per axis, µm, from δ and ln q. */
function confinementOf(found: AlternativeFit, spreadOf: (delta: number, logQ: number) => number) {
  const region = regionOf(found.model);
  const size = rangeOver(region, spreadOf);
  return {
    found,
    region,
    spread: {
      value: spreadOf(found.fit.delta, found.model.best),
      // Where q may be as large, or as small, as was looked for, the size has no limit on that side.
      lo: region.hi === null ? null : size.lo,
      hi: region.lo === null ? null : size.hi,
    },
    delta: { value: found.fit.delta, ...rangeOver(region, (delta) => delta) },
  };
}

/** The value of one with the interval of all. */
function span(one: Estimate, all: readonly Estimate[]): Estimate {
  const los = all.map(({ lo }) => lo);
  const his = all.map(({ hi }) => hi);
  return {
    value: one.value,
    lo: los.some((lo) => lo === null) ? null : Math.min(...(los as number[])),
    hi: his.some((hi) => hi === null) ? null : Math.max(...(his as number[])),
  };
}

function scale({ value, lo, hi }: Estimate, factor: number): Estimate {
  return {
    value: factor * value,
    lo: lo === null ? null : factor * lo,
    hi: hi === null ? null : factor * hi,
  };
}

function reportAnomalous(facts: ReportFacts, found: AlternativeFit): Reported {
  const { interval, blurFraction } = facts;
  const region = regionOf(found.model);
  const coefficient = (delta: number, alpha: number) => delta / interval ** alpha;
  return {
    ...NOTHING_ELSE,
    ...shared(facts, found, region, (alpha) => anomalousMsd(alpha, blurFraction)),
    D: null,
    K: {
      value: coefficient(found.fit.delta, found.model.best),
      ...rangeOver(region, coefficient),
    },
  };
}

function reportIndividual(facts: ReportFacts, found: AlternativeFit): Reported {
  const { interval, blurFraction, spectrum } = facts;
  const region = regionOf(found.model);
  const speed = (delta: number, logOmega: number) =>
    Math.sqrt(spectrum.dims * Math.exp(logOmega) * delta) / interval;
  return {
    ...NOTHING_ELSE,
    ...shared(facts, found, region, (logOmega) => (n) => {
      return freeMsd(blurFraction)(n) + Math.exp(logOmega) * n * n;
    }),
    D: diffusion(found, region, interval),
    individualSpeed: { value: speed(found.fit.delta, found.model.best), ...rangeOver(region, speed) },
  };
}

function diffusion(found: AlternativeFit, region: Region, interval: number): Estimate | null {
  if (!(found.fit.delta > 0)) return null;
  return { value: found.fit.delta / interval, ...rangeOver(region, (delta) => delta / interval) };
}

/** σ² and the curve with its band, which every model has. */
function shared(
  { free }: ReportFacts,
  found: AlternativeFit,
  region: Region,
  msd: (p: number) => MsdFunction,
): Pick<Reported, 'sigmaSquared' | 'curve' | 'curveLo' | 'curveHi'> {
  const { model, fit } = found;
  const errors =
    free.knownS === null ? standardErrors(model.spectrum, model.shapeAt(model.best), model.b, fit) : null;
  const values = new Map<number, { lo: number; hi: number }>();
  const band = (n: number) => {
    const known = values.get(n);
    if (known) return known;
    const at = valueOf(msd(model.best), fit, n);
    const range = rangeOver(region, (delta, p, s) => delta * msd(p)(n) + 2 * s);
    const found = { lo: Math.min(at, range.lo ?? 0), hi: Math.max(at, range.hi ?? at) };
    values.set(n, found);
    return found;
  };
  return {
    sigmaSquared: { value: fit.s, se: errors?.s ?? null },
    curve: curveOf(msd(model.best), fit.delta, fit.s),
    curveLo: (n) => (n === 0 ? 0 : band(n).lo),
    curveHi: (n) => (n === 0 ? 0 : band(n).hi),
  };
}

function valueOf(m: MsdFunction, fit: TwoParameterFit, n: number): number {
  return Math.max(0, fit.delta * m(n) + 2 * fit.s);
}

function curveOf(m: MsdFunction, delta: number, s: number): MsdFunction {
  return (n) => (n === 0 ? 0 : Math.max(0, delta * m(n) + 2 * s));
}
