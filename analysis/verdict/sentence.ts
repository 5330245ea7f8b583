import type { Drift, Estimate } from '../types';
import type { Decision } from './decide';

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
  /** Upper end of D's interval, µm²/s, for data without resolved motion. */
  readonly upperD: number | null;
  readonly sigmaKnown: boolean;
}

/** One plain sentence under the verdict: what was found and, when nothing could be decided, why. */
export function verdictSentence(facts: SentenceFacts): string {
  const { decision, tracks, alpha, drift } = facts;
  switch (decision.ground) {
    case 'free':
      return `The motion agrees with free diffusion: ${alphaRange(alpha)}, and nothing departs from it${drift?.removed ? ' once the common drift is taken off' : ''}.`;
    case 'common-drift':
      return `All tracks drift together at ${plain(drift?.speed ?? 0)} µm/s on top of free diffusion. A drift of the stage and a flow that carries the particles look the same here.`;
    case 'departs':
      return decision.resembles === 'drift'
        ? `The track runs in one direction at ${plain(drift?.speed ?? 0)} µm/s, which free diffusion does not explain. One track cannot tell a flow from persistent motion; more tracks of the same particles would.`
        : `The motion departs from free diffusion (${departureLooks(decision)}). D here is what free diffusion would need, not a property of this motion.`;
    case 'no-motion':
      return facts.upperD === null
        ? 'No motion is resolved above the localisation error.'
        : `No motion is resolved above the localisation error; D is below ${plain(facts.upperD)} µm²/s.`;
    case 'two-point-tracks':
      return `Every run of frames has only two positions, so there is one lag, no localisation error can be told from D${facts.sigmaKnown ? '' : ' (it was taken as zero)'}, and no regime can be decided. Longer tracks would settle it.`;
    case 'imprecise':
      return `The motion agrees with free diffusion, but D is known only to within a factor of two or so. More ${tracks === 1 ? 'frames or tracks' : 'tracks'} would settle it.`;
    case 'cannot-exclude':
      return `The motion is consistent with free diffusion, but the data cannot exclude ${alphaRange(alpha)}. More ${tracks === 1 ? 'frames or tracks' : 'tracks or longer ones'} would settle it.`;
  }
}

function departureLooks(decision: Decision): string {
  if (decision.resembles === 'confined') return 'it levels off, as confined motion does';
  if (decision.resembles === 'individual') return 'tracks run in directions of their own';
  return 'its spread grows with another power of time';
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
