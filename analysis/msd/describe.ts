import type { TwoParameterFit } from '../estimators/likelihood';
import type { ProfileInterval } from '../estimators/profile-interval';
import type { Track } from '../input/prepare';
import type { AnalysisSettings, LineFit, MsdCurve } from '../types';
import { ensembleMsd, lagsToShow } from './ensemble';
import { lineFit } from './line-fit';
import { ensembleError } from './msd-error';

export interface MsdFacts {
  readonly tracks: readonly Track[];
  readonly dims: number;
  readonly interval: number;
  readonly exposureFraction: number;
  readonly fit: TwoParameterFit;
  readonly ends: ProfileInterval;
  /** Common displacement per frame that the fit took off, µm an axis; the curve still contains it. */
  readonly driftStep: readonly number[] | null;
  readonly settings: AnalysisSettings;
}

/** The measured curve with errors, the fitted model through it with the band of D's interval, and the line fit. */
export function describeMsd(facts: MsdFacts): { msd: MsdCurve; lineFit: LineFit | null } {
  const { tracks, dims, interval, exposureFraction, fit, ends } = facts;
  const sums = ensembleMsd(tracks, dims, lagsToShow(tracks));
  const driftSquared = facts.driftStep?.reduce((total, step) => total + step * step, 0) ?? 0;
  // Per axis: MSD(n) = 2δn − (2e/3)δ + 2s, in frames; the drift adds its own square.
  const perAxis = (delta: number, s: number) => (lag: number) =>
    lag === 0 ? 0 : Math.max(0, 2 * delta * lag - ((2 * exposureFraction) / 3) * delta + 2 * s);
  const model = (delta: number, s: number) =>
    sums.lags.map((lag) => dims * perAxis(delta, s)(lag) + driftSquared * lag * lag);
  const msd: MsdCurve = {
    lag: sums.lags,
    lagSeconds: sums.lags.map((lag) => lag * interval),
    total: sums.total,
    perAxis: sums.perAxis,
    pairs: sums.pairs,
    se: sums.lags.map((lag, i) => ensembleError(perAxis(fit.delta, fit.s), sums.trackPairs[i]!, lag, dims)),
    model: model(fit.delta, fit.s),
    modelLo: model(ends.lo ?? 0, ends.lo === null ? fit.s : ends.sLo),
    modelHi: ends.hi === null ? model(fit.delta, fit.s) : model(ends.hi, ends.sHi),
  };
  const longest = Math.max(...tracks.map((track) => track.frames.length));
  const range = { first: facts.settings.fitLagFirst, last: facts.settings.fitLagLast };
  return { msd, lineFit: lineFit(sums, dims, interval, exposureFraction / 6, range, longest) };
}
