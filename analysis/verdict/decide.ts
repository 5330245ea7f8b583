import type { Verdict } from '../types';
import type { Alternatives } from './alternatives';
import type { FreeFit } from './free-fit';

/** What free diffusion is held against. "drift": the one direction of a single track. */
export type Rival = 'anomalous' | 'confined' | 'individual' | 'drift';

/**
 * The verdict with its ground. Thresholds were calibrated by simulation so that free data are called something else in
 * at most 5 % of cases, at every size of data set.
 */
export interface Decision {
  readonly verdict: Verdict;
  readonly ground:
    | 'free'
    | 'common-drift'
    | 'departs'
    | 'departs-unclear'
    | 'cannot-exclude'
    | 'no-motion'
    | 'two-point-tracks'
    | 'imprecise';
  /** Largest test statistic against free diffusion, and its threshold. */
  readonly departure: number;
  readonly departureThreshold: number;
  /** What the data look like when they depart, most likely first; one when it is clear. */
  readonly rivals: readonly Rival[];
  /** Whether a common drift of several tracks was found beside. */
  readonly withDrift: boolean;
}

/** 5 %, one-sided at the boundary: below this, motion is not resolved above the localisation error. */
export const MOTION_RESOLVED = 2.71;
/** Equivalence test (Schuirmann 1987, J. Pharmacokinet. Biopharm. 15:657): both ends must be excluded at 5 %. */
export const ENDS_EXCLUDED = 2.71;
/** The best model must beat the second by this much in −2 ln L: about e² to 1 in likelihood, as an information criterion asks. */
export const CLEARLY_BETTER = 2;

/** −2 ln likelihood ratio from which a departure is seen: of one track, and of several. Calibrated by simulation. */
export const DEPARTS_FROM = { one: 5.9, several: 6.3 } as const;
/** An interval of D wider than this relative standard error supports no verdict. */
export const PRECISE_TO = 0.5;
/** Exponents that free diffusion must be told from. */
export const ALPHA_ENDS = [0.5, 1.5] as const;

/** @param free - fitted to what is judged: filled gaps, shared motion taken off.   @param tracks - how many there are. */
export function decide(free: FreeFit, alternatives: Alternatives | null, tracks: number): Decision {
  const departureThreshold = tracks === 1 ? DEPARTS_FROM.one : DEPARTS_FROM.several;
  const none = { departure: 0, departureThreshold, rivals: [], withDrift: false };
  if (alternatives === null) return { verdict: 'undecided', ground: 'two-point-tracks', ...none };
  if (free.motionStatistic <= MOTION_RESOLVED) return { verdict: 'undecided', ground: 'no-motion', ...none };

  const shapes: [Rival, number][] = [
    ['anomalous', alternatives.anomalous.statistic],
    ['confined', alternatives.confined.statistic],
    ['individual', alternatives.individual?.statistic ?? 0],
  ];
  const departure = Math.max(...shapes.map(([, statistic]) => statistic));
  const common = { departure, departureThreshold, withDrift: tracks > 1 && free.driftSignificant };
  const lone = tracks === 1 && free.driftSignificant;
  if (departure > departureThreshold || lone) {
    // A drift has one number an axis where the others have one in all.
    const scores: [Rival, number][] =
      tracks === 1 ? [...shapes.slice(0, 2), ['drift', free.driftStatistic - 2 * (free.dims - 1)]] : shapes;
    const order = scores.filter(([, score]) => score > 0).sort((a, b) => b[1] - a[1]);
    const [best, second] = order;
    if (best && (!second || best[1] >= second[1] + CLEARLY_BETTER)) {
      return { verdict: verdictOf(best[0]), ground: 'departs', ...common, rivals: [best[0]] };
    }
    return {
      verdict: 'undecided',
      ground: 'departs-unclear',
      ...common,
      rivals: order.slice(0, 2).map(([rival]) => rival),
    };
  }
  if (free.driftSignificant) return { verdict: 'directed', ground: 'common-drift', ...common, rivals: [] };
  const { alpha, statisticAtHalf, statisticAtOneAndHalf } = alternatives.anomalous;
  const nearOne = alpha.value > ALPHA_ENDS[0] && alpha.value < ALPHA_ENDS[1];
  if (nearOne && statisticAtHalf >= ENDS_EXCLUDED && statisticAtOneAndHalf >= ENDS_EXCLUDED) {
    if (free.relativeError < PRECISE_TO) return { verdict: 'free', ground: 'free', ...common, rivals: [] };
    return { verdict: 'undecided', ground: 'imprecise', ...common, rivals: [] };
  }
  return { verdict: 'undecided', ground: 'cannot-exclude', ...common, rivals: [] };
}

function verdictOf(rival: Rival): Verdict {
  return rival === 'individual' || rival === 'drift' ? 'directed' : rival;
}
