import type { Verdict } from '../types';
import type { Alternatives } from './alternatives';
import type { FreeFit } from './free-fit';

/**
 * The verdict with its ground. Thresholds were calibrated by simulation so that free data are called something else in
 * at most 5 % of cases, at every size of data set.
 */
export interface Decision {
  readonly verdict: Verdict;
  readonly ground:
    'free' | 'common-drift' | 'departs' | 'cannot-exclude' | 'no-motion' | 'two-point-tracks' | 'imprecise';
  /** Largest test statistic against free diffusion, and its threshold. */
  readonly departure: number;
  readonly departureThreshold: number;
  /** What the data look like when they depart: the alternative with the largest statistic. */
  readonly resembles: 'anomalous' | 'confined' | 'individual' | 'drift' | null;
}

/** 5 %, one-sided at the boundary: below this, motion is not resolved above the localisation error. */
const MOTION_RESOLVED = 2.71;
/** Equivalence test (Schuirmann 1987, J. Pharmacokinet. Biopharm. 15:657): both ends must be excluded at 5 %. */
const ENDS_EXCLUDED = 2.71;

export function decide(free: FreeFit, alternatives: Alternatives | null, tracks: number): Decision {
  const departureThreshold = tracks === 1 ? 5.9 : 6.3;
  const none = { departure: 0, departureThreshold, resembles: null };
  if (alternatives === null) return { verdict: 'undecided', ground: 'two-point-tracks', ...none };
  if (free.motionStatistic <= MOTION_RESOLVED) return { verdict: 'undecided', ground: 'no-motion', ...none };

  const candidates = [
    ['anomalous', alternatives.anomalous.statistic],
    ['confined', alternatives.confined.statistic],
    ['individual', alternatives.individual?.statistic ?? 0],
  ] as const;
  const [name, departure] = candidates.reduce((best, one) => (one[1] > best[1] ? one : best));
  if (departure > departureThreshold) {
    return { verdict: 'undecided', ground: 'departs', departure, departureThreshold, resembles: name };
  }
  const common = { departure, departureThreshold, resembles: null };
  if (free.driftSignificant) {
    // One track cannot tell a flow from a persistent walk, so a drift of one track is a departure, not yet a verdict.
    if (tracks === 1) return { verdict: 'undecided', ground: 'departs', ...common, resembles: 'drift' };
    return { verdict: 'directed', ground: 'common-drift', ...common };
  }
  const { alpha, statisticAtHalf, statisticAtOneAndHalf } = alternatives.anomalous;
  const nearOne = alpha.value > 0.5 && alpha.value < 1.5;
  if (nearOne && statisticAtHalf >= ENDS_EXCLUDED && statisticAtOneAndHalf >= ENDS_EXCLUDED) {
    if (free.relativeError < 0.5) return { verdict: 'free', ground: 'free', ...common };
    return { verdict: 'undecided', ground: 'imprecise', ...common };
  }
  return { verdict: 'undecided', ground: 'cannot-exclude', ...common };
}
