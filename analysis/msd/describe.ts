import type { Track } from '../input/prepare';
import type { AnalysisSettings, LineFit, MsdCurve } from '../types';
import { ensembleMsd, lagsToShow } from './ensemble';
import { lineFit } from './line-fit';
import { freeError, generalError, type ModelMsd } from './msd-error';

export interface MsdFacts {
  readonly tracks: readonly Track[];
  readonly dims: number;
  readonly interval: number;
  readonly exposureFraction: number;
  /** Model per axis against the lag in frames, µm², with the band of its interval. */
  readonly curve: ModelMsd;
  readonly curveLo: ModelMsd;
  readonly curveHi: ModelMsd;
  /** Whether displacements of the model are uncorrelated beyond the next frame: then errors are quickly computed. */
  readonly free: boolean;
  /** Common displacement per frame that the fit took off, µm an axis; the curve still contains it. */
  readonly driftStep: readonly number[] | null;
  /** Variance per axis and frame of shared motion that was taken off, µm²; the curve still contains it. */
  readonly sharedVariance: number;
  readonly settings: AnalysisSettings;
}

/** The measured curve with errors, the fitted model through it with its band, and the line fit. */
export function describeMsd(facts: MsdFacts): { msd: MsdCurve; lineFit: LineFit | null } {
  const { tracks, dims, interval, exposureFraction } = facts;
  const sums = ensembleMsd(tracks, dims, lagsToShow(tracks));
  const driftSquared = facts.driftStep?.reduce((total, step) => total + step * step, 0) ?? 0;
  const model = (perAxis: ModelMsd) =>
    sums.lags.map((lag) => dims * (perAxis(lag) + facts.sharedVariance * lag) + driftSquared * lag * lag);
  const error = facts.free ? freeError : generalError;
  const msd: MsdCurve = {
    lag: sums.lags,
    lagSeconds: sums.lags.map((lag) => lag * interval),
    total: sums.total,
    perAxis: sums.perAxis,
    pairs: sums.pairs,
    se: sums.lags.map((lag, i) => error(facts.curve, sums.trackPairs[i]!, lag, dims)),
    model: model(facts.curve),
    modelLo: model(facts.curveLo),
    modelHi: model(facts.curveHi),
  };
  const longest = Math.max(...tracks.map((track) => track.frames.length));
  const range = { first: facts.settings.fitLagFirst, last: facts.settings.fitLagLast };
  return { msd, lineFit: lineFit(sums, dims, interval, exposureFraction / 6, range, longest) };
}
