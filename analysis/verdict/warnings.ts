import type { Prepared } from '../input/prepare';
import type { AnalysisSettings, Drift, SharedMotion, Trajectories, Warning } from '../types';
import type { Spectrum } from '../spectrum/spectrum';
import { WATER_HIGHEST, WATER_LOWEST } from '../physics/water';
import type { Decision } from './decide';
import type { FreeFit } from './free-fit';

export interface WarningFacts {
  readonly readings: readonly Trajectories[];
  readonly settings: AnalysisSettings;
  readonly prepared: Prepared;
  readonly spectrum: Spectrum;
  readonly exposure: { readonly fraction: number; readonly stated: boolean; readonly tooLong: boolean };
  readonly free: FreeFit;
  readonly decision: Decision;
  readonly drift: Drift | null;
  readonly sigmaSquared: { readonly value: number; readonly se: number | null };
  readonly fittedSigma: boolean;
  readonly mislinks: number;
  readonly sharedMotion: SharedMotion | null;
  /** Displacements of frames in which one track is alone, lost when shared motion is taken off. */
  readonly alone: number;
}

/** What a careful colleague would remark about this result: each with what it means and what to do. */
export function resultWarnings(facts: WarningFacts): Warning[] {
  const warnings: Warning[] = [];
  const look = (code: string, message: string) => warnings.push({ code, level: 'look', message });
  const problem = (code: string, message: string) => warnings.push({ code, level: 'problem', message });
  const { exposure, settings, sigmaSquared, free, drift, prepared } = facts;

  if (!exposure.stated) {
    look(
      'exposure-not-stated',
      'The exposure is not stated and was taken as zero. D does not depend on it, but the localisation error does.',
    );
  }
  if (exposure.tooLong) {
    problem(
      'exposure-too-long',
      'The stated exposure is longer than the frame interval, which no camera can do; the whole interval was used. Check both values.',
    );
  }
  if (facts.decision.ground === 'two-point-tracks' && settings.sigma === null) {
    look(
      'two-point-tracks',
      'Every run of frames has two positions only, so the localisation error was taken as zero. If it is known, state it in the settings.',
    );
  }
  if (facts.spectrum.coefficients < 20 && facts.decision.ground !== 'two-point-tracks') {
    look(
      'few-displacements',
      `Only ${facts.spectrum.displacements} displacements were measured, so the interval is wide. More frames or tracks narrow it.`,
    );
  }
  if (facts.fittedSigma && sigmaSquared.se !== null && sigmaSquared.value < -2 * sigmaSquared.se) {
    problem(
      'sigma-negative',
      'The fitted variance of the localisation error is negative beyond chance. The exposure or the frame interval may be wrong, or the motion persists from frame to frame.',
    );
  }
  if (free.dispersion > 1) {
    look(
      'spread-too-wide',
      'Displacements scatter more than one diffusion coefficient explains: there may be several kinds of particle. D is their average, and its interval may be too short.',
    );
  }
  if (facts.mislinks > 0) {
    look(
      'mislinks',
      `${facts.mislinks === 1 ? 'A displacement is' : `${facts.mislinks} displacements are`} too long for the same particle; the track was cut there. Check how positions were joined into tracks.`,
    );
  }
  if (facts.sharedMotion?.removed) {
    look(
      'shared-motion',
      `All tracks shake together from frame to frame, as a moving stage makes them; that was taken off.${facts.alone > 0 ? ` ${facts.alone === 1 ? 'One displacement' : `${facts.alone} displacements`} in frames with one track could not be corrected and ${facts.alone === 1 ? 'was' : 'were'} left out.` : ''}`,
    );
  }
  if (
    facts.decision.rivals[0] === 'anomalous' &&
    facts.decision.ground === 'departs' &&
    prepared.tracks.length === 1
  ) {
    look(
      'persistence-or-drift',
      'One short track hardly separates persistent or hindered motion from a drift or a wall. More tracks would.',
    );
  }
  if (drift?.significant && prepared.tracks.length > 1) {
    look(
      'drift-ambiguous',
      'All tracks move together. Whether the stage drifts or a flow carries the particles cannot be told from the tracks.',
    );
  }
  if (drift?.significant && settings.drift === 'keep') {
    problem('drift-kept', 'A significant common drift was kept in, as the settings ask, so D is too large.');
  }
  if (settings.medium !== null && 'name' in settings.medium && settings.temperature !== null) {
    if (settings.temperature < WATER_LOWEST || settings.temperature > WATER_HIGHEST) {
      look(
        'water-range',
        `The viscosity of water is known from ${WATER_LOWEST} to ${WATER_HIGHEST} °C only; no size or viscosity was computed.`,
      );
    }
  }
  const missing = settings.excludedTracks.filter(
    (one) => !facts.readings[one.reading]?.trackIds.includes(one.track),
  );
  if (missing.length > 0) {
    look(
      'excluded-track-missing',
      `${missing.length} track(s) to leave out are not in the readings: ${missing
        .slice(0, 3)
        .map((one) => one.track)
        .join(', ')}.`,
    );
  }
  return warnings;
}
