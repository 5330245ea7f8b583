import { standardErrors } from './estimators/likelihood';
import type { ProfileInterval } from './estimators/profile-interval';
import { prepare, type Prepared } from './input/prepare';
import { isUniform, segmentsOf } from './input/segments';
import { describeMsd } from './msd/describe';
import { sizeOrViscosity } from './physics/size-or-viscosity';
import { spectrumOf, type Spectrum } from './spectrum/spectrum';
import type {
  AnalysisFailure,
  AnalysisResult,
  AnalysisSettings,
  Drift,
  Estimate,
  Exposure,
  Trajectories,
  Warning,
} from './types';
import { fitAlternatives, type Alternatives } from './verdict/alternatives';
import { decide, type Decision } from './verdict/decide';
import { chosen, fitFree, freeInterval, freeShape, type FreeFit } from './verdict/free-fit';
import { verdictSentence } from './verdict/sentence';
import { resultWarnings } from './verdict/warnings';

/** Raised whenever a number that the engine gives could change: results keep the engine that made them. */
export const ENGINE_VERSION = 'motebook-engine/1';

/** Squared displacements below this, µm², are no motion: far below it their squares would not be numbers any more. */
const NO_MOTION = 1e-60;

export const DEFAULT_SETTINGS: AnalysisSettings = {
  dims: 'auto',
  fitLagFirst: null,
  fitLagLast: null,
  drift: 'auto',
  minTrackFrames: 2,
  exposure: null,
  sigma: null,
  medium: null,
  temperature: null,
  particleDiameter: null,
  geometry: 'box',
  excludedTracks: [],
};

/**
 * Diffusion coefficient with its 95 % interval and a verdict on the regime, from one or several readings taken as one
 * ensemble. Synchronous, pure and deterministic: the same input gives the same numbers in a server, a browser or a script.
 * @param readings - at least one; positions in µm, times in s.
 * @returns a failure with a code and a remedy when nothing can be computed; every number of a result is finite or null.
 * Methods and sources: the docstrings of what is called here.
 */
export function analyse(
  readings: readonly Trajectories[],
  settings: AnalysisSettings,
): AnalysisResult | AnalysisFailure {
  const prepared = prepare(readings, settings);
  if ('code' in prepared) return fail(prepared.code, prepared.message);
  const { segments, gaps } = segmentsOf(prepared.tracks);
  if (prepared.tracks.length === 0) {
    return fail(
      'no-tracks',
      'No track has two readable positions, so nothing can be said about motion. Check the columns of the reading and the tracks that were left out.',
    );
  }
  if (segments.length === 0) {
    return fail(
      'no-displacements',
      'No track has two consecutive frames, so no displacement can be measured. Check the frame interval.',
    );
  }
  const spectrum = spectrumOf(segments, prepared.dims);
  if (spectrum.groups.every((group) => group.power.every((value) => value < NO_MOTION))) {
    return fail(
      'nothing-moves',
      'All positions of every track are the same, to the last digit. Check that the position columns are the right ones.',
    );
  }
  if (isUniform(segments)) {
    return fail(
      'nothing-diffuses',
      'All tracks run on at one constant velocity, to the last digit, so nothing diffuses. Check that the position columns are the right ones: a column of times or frame numbers looks like this.',
    );
  }
  const exposure = exposureOf(readings, settings, prepared.interval);
  const free = fitFree(spectrum, exposure.fraction, settings);
  const alternatives = alternativesOf(spectrum, free, exposure.fraction, prepared.tracks.length);
  const decision = decide(free, alternatives, prepared.tracks.length);
  return assemble({
    readings,
    settings,
    prepared,
    spectrum,
    segments: segments.length,
    gaps,
    exposure,
    free,
    alternatives,
    decision,
  });
}

interface Findings {
  readonly readings: readonly Trajectories[];
  readonly settings: AnalysisSettings;
  readonly prepared: Prepared;
  readonly spectrum: Spectrum;
  readonly segments: number;
  readonly gaps: number;
  readonly exposure: { fraction: number; stated: boolean; tooLong: boolean };
  readonly free: FreeFit;
  readonly alternatives: Alternatives | null;
  readonly decision: Decision;
}

function assemble(found: Findings): AnalysisResult {
  const { prepared, spectrum, free, decision } = found;
  const { interval, dims, tracks } = prepared;
  const used = chosen(spectrum, free);
  const ends = freeInterval(spectrum, free);
  const resolved = decision.ground !== 'no-motion' && used.fit.delta > 0;
  const D = resolved ? toEstimate(used.fit.delta, ends, interval) : null;
  const errors = free.knownS === null ? standardErrors(used.spectrum, free.a, free.b, used.fit) : null;
  const drift = driftOf(free, interval);
  const alpha = resolved && found.alternatives ? found.alternatives.anomalous.alpha : null;
  const sentence = verdictSentence({
    decision,
    tracks: tracks.length,
    alpha,
    drift,
    upperD: ends.hi === null ? null : ends.hi / interval,
    sigmaKnown: found.settings.sigma !== null,
  });
  const sigmaSquared = { value: used.fit.s, se: errors?.s ?? null };
  const warnings: Warning[] = [
    ...prepared.warnings,
    ...resultWarnings({ ...found, drift, sigmaSquared, fittedSigma: free.knownS === null }),
  ];
  const curve = describeMsd({
    tracks,
    dims,
    interval,
    exposureFraction: found.exposure.fraction,
    fit: used.fit,
    ends,
    driftStep: free.driftRemoved && free.drifting ? free.drifting.step : null,
    settings: found.settings,
  });
  return {
    engine: ENGINE_VERSION,
    readingHashes: found.readings.map((reading) => reading.hash),
    settings: found.settings,
    D,
    sigmaSquared,
    sigma: used.fit.s > 0 ? Math.sqrt(used.fit.s) : null,
    verdict: decision.verdict,
    sentence,
    drift,
    alpha,
    L: null,
    dims,
    frameInterval: interval,
    exposureFraction: found.exposure.fraction,
    exposureStated: found.exposure.stated,
    tracks: tracks.length,
    frames: tracks.reduce((total, track) => total + track.frames.length, 0),
    displacements: spectrum.displacements,
    segments: found.segments,
    gaps: found.gaps,
    msd: curve.msd,
    lineFit: curve.lineFit,
    stokesEinstein: sizeOrViscosity(found.settings, D),
    warnings,
    exclusions: prepared.exclusions,
  };
}

function alternativesOf(
  spectrum: Spectrum,
  free: FreeFit,
  blurFraction: number,
  tracks: number,
): Alternatives | null {
  if (spectrum.groups.every((group) => group.length === 1)) return null;
  const used = chosen(spectrum, free);
  return fitAlternatives({
    spectrum: used.spectrum,
    b: free.b,
    free: used.fit,
    freeShape: freeShape(spectrum, blurFraction),
    knownS: free.knownS,
    blurFraction,
    dispersion: free.dispersion,
    tracks,
  });
}

function toEstimate(delta: number, ends: ProfileInterval, interval: number): Estimate {
  return {
    value: delta / interval,
    lo: ends.lo === null ? null : ends.lo / interval,
    hi: ends.hi === null ? null : ends.hi / interval,
  };
}

function driftOf(free: FreeFit, interval: number): Drift | null {
  if (!free.drifting) return null;
  const { step, se } = free.drifting;
  if (!step.every(Number.isFinite) || !Number.isFinite(se)) return null;
  const velocity = step.map((value) => value / interval);
  return {
    velocity,
    se: velocity.map(() => se / interval),
    speed: Math.hypot(...velocity),
    statistic: free.driftStatistic,
    threshold: free.driftThreshold,
    significant: free.driftSignificant,
    removed: free.driftRemoved,
  };
}

/** The exposure that counts: the block's own, else what all readings agree on; unstated is zero. */
function exposureOf(readings: readonly Trajectories[], settings: AnalysisSettings, interval: number) {
  const stated = settings.exposure ?? commonExposure(readings);
  if (stated === null) return { fraction: 0, stated: false, tooLong: false };
  const fraction = 'fraction' in stated ? stated.fraction : stated.seconds / interval;
  // A camera may state 50.01 ms of a 50 ms interval; more than that is a mistake, said in a warning.
  return { fraction: Math.min(1, Math.max(0, fraction)), stated: true, tooLong: fraction > 1.01 };
}

function commonExposure(readings: readonly Trajectories[]): Exposure | null {
  const first = readings[0]?.exposure ?? null;
  return first !== null && readings.every((one) => JSON.stringify(one.exposure) === JSON.stringify(first))
    ? first
    : null;
}

function fail(code: string, message: string): AnalysisFailure {
  return { failed: true, engine: ENGINE_VERSION, code, message };
}
