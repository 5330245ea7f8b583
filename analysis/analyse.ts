import { qualityChecks } from './checks/checks';
import { trackFacts, type CommonFit } from './checks/per-track';
import { findCommonMotion, removeCommonMotion, type CommonMotion } from './input/common-motion';
import { fillGaps } from './input/fill-gaps';
import { cutMislinks } from './input/mislinks';
import { prepare, type Prepared, type Track } from './input/prepare';
import { isUniform, segmentsOf, type Segment } from './input/segments';
import { stepsOf, type Steps } from './input/steps';
import { describeMsd } from './msd/describe';
import { sizeOrViscosity } from './physics/size-or-viscosity';
import { spectrumOf, type Spectrum } from './spectrum/spectrum';
import type {
  AnalysisFailure,
  AnalysisResult,
  AnalysisSettings,
  Check,
  Drift,
  Exposure,
  ModelFit,
  Trajectories,
} from './types';
import { fitAlternatives, type Alternatives } from './verdict/alternatives';
import { decide, type Decision } from './verdict/decide';
import { excludedWidth } from './verdict/excluded-size';
import { chosen, fitFree, freeInterval, freeShape, withDriftDecided, type FreeFit } from './verdict/free-fit';
import { report } from './verdict/report';
import { stageDriftVariance } from './verdict/stage-drift';
import { verdictSentence } from './verdict/sentence';
import { resultWarnings } from './verdict/warnings';

/** Raised whenever a number that the engine gives could change: results keep the engine that made them. */
export const ENGINE_VERSION = 'motebook-engine/2';

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
  if (prepared.tracks.length === 0) {
    return fail(
      'no-tracks',
      'No track has two readable positions, so nothing can be said about motion. Check the columns of the reading and the tracks that were left out.',
    );
  }
  const { pieces, cuts } = cutMislinks(prepared.tracks, prepared.dims);
  const measured = stepsOf(pieces);
  const common = findCommonMotion(measured, prepared.dims);
  const { steps, alone } = common?.present
    ? removeCommonMotion(measured, prepared.dims)
    : { steps: measured, alone: 0 };
  const { segments, gaps } = segmentsOf(steps);
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
  const judged = judge({ steps, spectrum, prepared, settings, exposure: exposure.fraction, common });
  return assemble({
    segmentList: segments,
    readings,
    settings,
    prepared,
    pieces,
    spectrum,
    segments: segments.length,
    gaps,
    exposure,
    common,
    alone,
    cuts,
    ...judged,
  });
}

interface JudgeInput {
  readonly steps: readonly Steps[];
  readonly spectrum: Spectrum;
  readonly prepared: Prepared;
  readonly settings: AnalysisSettings;
  readonly exposure: number;
  readonly common: CommonMotion | null;
}

interface Judged {
  /** On runs of measured frames: what D rests on. */
  readonly free: FreeFit;
  /** On series whose short gaps are bridged: what the verdict rests on. */
  readonly judged: FreeFit;
  readonly alternatives: Alternatives | null;
  readonly decision: Decision;
  readonly filled: number;
}

/** The verdict, and the fits that it came from. */
function judge({ steps, spectrum, prepared, settings, exposure, common }: JudgeInput): Judged {
  const tracks = prepared.tracks.length;
  const stage = stageDriftVariance(common, prepared.dims);
  const onRuns = fitFree(spectrum, exposure, settings, stage);
  const fit = chosen(spectrum, onRuns).fit;
  const bridged =
    fit.delta > 0
      ? fillGaps(steps, {
          delta: fit.delta,
          s: fit.s,
          blurFraction: exposure,
          drift: onRuns.driftRemoved ? onRuns.drifting!.step : [],
        })
      : { steps, filled: 0 };
  const series =
    bridged.filled > 0 ? spectrumOf(segmentsOf(bridged.steps).segments, prepared.dims) : spectrum;
  const judged = bridged.filled > 0 ? fitFree(series, exposure, settings, stage) : onRuns;
  const alternatives = alternativesOf(series, judged, exposure, tracks, settings, common?.present ?? false);
  const free = withDriftDecided(spectrum, onRuns, judged.driftSignificant, settings);
  const decision = decide({ ...judged, motionStatistic: free.motionStatistic }, alternatives, tracks);
  return { free, judged, alternatives, decision, filled: bridged.filled };
}

interface Findings extends Judged {
  readonly readings: readonly Trajectories[];
  readonly settings: AnalysisSettings;
  readonly prepared: Prepared;
  /** Tracks, cut at mislinks. */
  readonly pieces: readonly Track[];
  readonly spectrum: Spectrum;
  readonly segmentList: readonly Segment[];
  readonly segments: number;
  readonly gaps: number;
  readonly exposure: { fraction: number; stated: boolean; tooLong: boolean };
  readonly common: CommonMotion | null;
  readonly alone: number;
  readonly cuts: number;
}

function assemble(found: Findings): AnalysisResult {
  const { prepared, spectrum, free, judged, alternatives, decision, common, settings } = found;
  const { interval, dims, tracks } = prepared;
  const numbers = report({
    spectrum,
    free,
    alternatives,
    decision,
    interval,
    blurFraction: found.exposure.fraction,
    positions: judged.driftSignificant || common?.present ? null : found.pieces,
  });
  const moves = decision.ground !== 'no-motion';
  const drift = driftOf(judged, free.driftRemoved, interval);
  const alpha = moves && alternatives ? alternatives.anomalous.alpha : null;
  const excluded = moves && alternatives ? excludedWidth(alternatives.confined) : null;
  const upper = freeInterval(spectrum, free).hi;
  const sharedMotion = common && {
    D: common.variance / (2 * interval),
    z: common.z,
    removed: common.present,
  };
  const departed = decision.ground === 'departs' && decision.rivals[0] !== 'drift';
  const curve = describeMsd({
    tracks: found.pieces,
    dims,
    interval,
    exposureFraction: found.exposure.fraction,
    curve: numbers.curve,
    curveLo: numbers.curveLo,
    curveHi: numbers.curveHi,
    free: !departed,
    driftStep: free.driftRemoved ? (judged.drifting?.step ?? null) : null,
    sharedVariance: common?.present ? common.variance : 0,
    settings,
  });
  return {
    engine: ENGINE_VERSION,
    readingHashes: found.readings.map((reading) => reading.hash),
    settings,
    D: numbers.D,
    sigmaSquared: numbers.sigmaSquared,
    sigma: numbers.sigmaSquared.value > 0 ? Math.sqrt(numbers.sigmaSquared.value) : null,
    verdict: decision.verdict,
    sentence: verdictSentence({
      decision,
      tracks: tracks.length,
      alpha,
      drift,
      confinement: numbers.confinement,
      geometry: settings.geometry,
      individualSpeed: numbers.individualSpeed,
      excludedWidth: excluded,
      upperD: upper === null ? null : upper / interval,
      sigmaKnown: settings.sigma !== null,
    }),
    drift,
    alpha,
    K: numbers.K,
    L: numbers.confinement?.width ?? null,
    confinement: numbers.confinement,
    excludedWidth: excluded,
    individualSpeed: numbers.individualSpeed,
    models: alternatives ? modelList(judged, alternatives, drift, interval, dims) : [],
    dispersion: judged.dispersion,
    sharedMotion,
    mislinks: found.cuts,
    gapsFilled: found.filled,
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
    stokesEinstein: sizeOrViscosity(settings, numbers.D),
    warnings: [
      ...prepared.warnings,
      ...resultWarnings({
        ...found,
        drift,
        sigmaSquared: numbers.sigmaSquared,
        fittedSigma: free.knownS === null,
        mislinks: found.cuts,
        sharedMotion,
      }),
    ],
    checks: checksOf(found),
    exclusions: [
      ...prepared.exclusions,
      ...(found.alone > 0
        ? [{ what: 'displacements' as const, reason: 'no other track in the frame', count: found.alone }]
        : []),
    ],
  };
}

function checksOf({
  readings,
  pieces,
  segmentList,
  prepared,
  spectrum,
  free,
  judged,
  exposure,
}: Findings): Check[] {
  const common: CommonFit = {
    fit: chosen(spectrum, free).fit,
    blurFraction: exposure.fraction,
    drift: free.driftRemoved ? (judged.drifting?.step ?? []) : [],
    interval: prepared.interval,
  };
  const sizes = new Set(readings.map((reading) => reading.pixelSize ?? null));
  return qualityChecks({
    tracks: pieces,
    segments: segmentList,
    facts: trackFacts(segmentList, prepared.dims, common),
    common,
    pixelSize: sizes.size === 1 ? [...sizes][0]! : null,
  });
}

/** What free diffusion was held against, best first. */
function modelList(
  judged: FreeFit,
  { anomalous, confined, individual }: Alternatives,
  drift: Drift | null,
  interval: number,
  dims: number,
): ModelFit[] {
  const D = (delta: number) => (delta > 0 ? delta / interval : null);
  const models: ModelFit[] = [
    { name: 'anomalous', statistic: anomalous.statistic, D: null, parameter: anomalous.shape },
    {
      name: 'confined',
      statistic: confined.statistic,
      D: D(confined.fit.delta),
      parameter: interval / confined.shape,
    },
  ];
  if (individual) {
    models.push({
      name: 'individual',
      statistic: individual.statistic,
      D: D(individual.fit.delta),
      parameter: Math.sqrt(dims * individual.shape * Math.max(0, individual.fit.delta)) / interval,
    });
  }
  if (drift && judged.drifting) {
    models.push({
      name: 'drift',
      statistic: judged.driftStatistic,
      D: D(judged.drifting.fit.delta),
      parameter: drift.speed,
    });
  }
  return models.sort((a, b) => b.statistic - a.statistic);
}

function alternativesOf(
  spectrum: Spectrum,
  free: FreeFit,
  blurFraction: number,
  tracks: number,
  settings: AnalysisSettings,
  shaken: boolean,
): Alternatives | null {
  if (spectrum.groups.every((group) => group.length === 1)) return null;
  // The drift of a single track is itself a rival, so it is taken off beforehand only when that is asked for; that of
  // several is taken off when it is there, or it would pass for something else; so is the way that a shaking stage went.
  const off = settings.drift === 'remove' || (tracks > 1 && (free.driftSignificant || shaken));
  const used = (off ? free.drifting : null) ?? { spectrum, fit: free.still };
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

/** @param free - fitted to what was judged.   @param removed - whether the reported D is without it. */
function driftOf(free: FreeFit, removed: boolean, interval: number): Drift | null {
  if (!free.drifting) return null;
  const { step } = free.drifting;
  const se = free.driftError;
  if (!step.every(Number.isFinite) || !Number.isFinite(se)) return null;
  const velocity = step.map((value) => value / interval);
  return {
    velocity,
    se: velocity.map(() => se / interval),
    speed: Math.hypot(...velocity),
    statistic: free.driftStatistic,
    threshold: free.driftThreshold,
    significant: free.driftSignificant,
    removed,
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
