import type { Confinement, Drift, Estimate } from '../types';
import type { Decision, Rival } from './decide';

/** Two significant digits, plain; the interface sets its own typography. */
export function plain(value: number, digits = 2): string {
  if (value === 0) return '0';
  const text = value.toPrecision(digits);
  return text.includes('e') ? Number(text).toString() : text;
}

export interface SentenceFacts {
  readonly decision: Decision;
  readonly tracks: number;
  readonly alpha: Estimate | null;
  readonly drift: Drift | null;
  readonly confinement: Confinement | null;
  readonly geometry: 'box' | 'circle' | 'sphere';
  readonly individualSpeed: Estimate | null;
  readonly excludedWidth: number | null;
  /** Upper end of D's interval, µm²/s, for data without resolved motion. */
  readonly upperD: number | null;
  readonly sigmaKnown: boolean;
}

/** Plain words under the verdict: what was found and, when nothing could be decided, why and what would settle it. */
export function verdictSentence(facts: SentenceFacts): string {
  const { decision, tracks, alpha, drift } = facts;
  switch (decision.ground) {
    case 'free':
      return `The motion agrees with free diffusion: ${alphaRange(alpha)}, and nothing departs from it${drift?.removed ? ' once the common drift is taken off' : ''}.`;
    case 'common-drift':
      return `All tracks drift together at ${plain(drift?.speed ?? 0)} µm/s on top of free diffusion. A drift of the stage and a flow that carries the particles look the same here.`;
    case 'departs':
      return departed(facts, decision.rivals[0]!) + besides(facts);
    case 'departs-unclear':
      return `${unclear(decision.rivals, tracks)}${besides(facts)}`;
    case 'no-motion':
      return facts.upperD === null
        ? 'No motion is resolved above the localisation error. Longer tracks, or frames further apart, would show slower motion.'
        : `No motion is resolved above the localisation error; D is below ${plain(facts.upperD)} µm²/s. Longer tracks, or frames further apart, would show slower motion.`;
    case 'two-point-tracks':
      return `Every run of frames has only two positions, so there is one lag, no localisation error can be told from D${facts.sigmaKnown ? '' : ' (it was taken as zero)'}, and no regime can be decided. Longer tracks would settle it.`;
    case 'imprecise':
      return `The motion agrees with free diffusion, but D is known only to within a factor of two or so. ${moreOf(tracks)} would settle it.`;
    case 'cannot-exclude':
      return `The motion is consistent with free diffusion, but the data cannot exclude ${alphaRange(alpha)}. ${moreOf(tracks)} would settle it.`;
  }
}

const moreOf = (tracks: number) => (tracks === 1 ? 'More frames or tracks' : 'More tracks or longer ones');

/** What is said of a departure whose kind is clear. */
function departed(facts: SentenceFacts, rival: Rival): string {
  switch (rival) {
    case 'confined':
      return `The motion is confined: its spread levels off, as in ${sizeOf(facts)}. D is that of the motion within.`;
    case 'anomalous':
      return `The spread grows as time to the power ${alphaValue(facts.alpha)}, not in proportion to time, so one D does not describe it; K does.`;
    case 'individual':
      return `Each track runs in a direction of its own, at ${plain(facts.individualSpeed?.value ?? 0)} µm/s (root mean square), on top of free diffusion.`;
    case 'drift':
      return `The track runs in one direction at ${plain(facts.drift?.speed ?? 0)} µm/s on top of free diffusion. One track cannot tell a flow from persistent motion; more tracks of the same particles would.`;
  }
}

function sizeOf({ confinement, geometry }: SentenceFacts): string {
  if (!confinement) return 'a closed space';
  if (geometry === 'circle') return `a circle of ${plain(confinement.circleRadius.value)} µm radius`;
  if (geometry === 'sphere') return `a sphere of ${plain(confinement.sphereRadius.value)} µm radius`;
  return `a box ${plain(confinement.width.value)} µm wide`;
}

const LOOKS: Readonly<Record<Rival, string>> = {
  anomalous: 'a spread that grows with another power of time',
  confined: 'confinement',
  individual: 'tracks that run in directions of their own',
  drift: 'a steady run in one direction',
};

function unclear(rivals: readonly Rival[], tracks: number): string {
  const [one, other] = rivals;
  const looks = other ? `${LOOKS[one!]} and ${LOOKS[other]} fit about equally well` : 'how is not clear';
  return `The motion departs from free diffusion, but ${looks}. D here is what free diffusion would need, not a property of this motion. ${moreOf(tracks)} would tell them apart.`;
}

/** A common drift beside another finding. */
function besides({ decision, drift }: SentenceFacts): string {
  return decision.withDrift && drift ? ` All tracks also drift together at ${plain(drift.speed)} µm/s.` : '';
}

function alphaValue(alpha: Estimate | null): string {
  if (alpha === null) return 'other than one';
  const range =
    alpha.lo !== null && alpha.hi !== null ? ` (${alpha.lo.toFixed(2)} to ${alpha.hi.toFixed(2)})` : '';
  return `${alpha.value.toFixed(2)}${range}`;
}

function alphaRange(alpha: Estimate | null): string {
  if (alpha === null) return 'its spread grows in proportion to time';
  const lo = alpha.lo === null ? null : alpha.lo.toFixed(2);
  const hi = alpha.hi === null ? null : alpha.hi.toFixed(2);
  if (lo !== null && hi !== null) return `an exponent α from ${lo} to ${hi}`;
  if (lo !== null) return `an exponent α above ${lo}`;
  if (hi !== null) return `an exponent α below ${hi}`;
  return 'any exponent α';
}
