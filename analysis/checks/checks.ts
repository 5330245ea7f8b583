import { covarianceEstimate } from '../estimators/covariance';
import { median } from '../input/frame-interval';
import type { Segment } from '../input/segments';
import { chiSquareTailOf } from '../statistics/gamma';
import type { Check } from '../types';
import type { Track } from '../input/prepare';
import type { CommonFit, TrackFacts } from './per-track';

export interface CheckFacts {
  readonly tracks: readonly Track[];
  readonly segments: readonly Segment[];
  readonly facts: readonly TrackFacts[];
  readonly common: CommonFit;
  /** Pixel of the camera in the sample, µm; null when nothing was measured in pixels. */
  readonly pixelSize: number | null;
}

/** Fewer displacements than this in a track hardly say anything of its own. */
const SHORT = 10;
/** A check asks for a look below one in a thousand, so that a dozen checks rarely cry wolf. */
const UNLIKELY = 1e-3;

/** Questions that a careful colleague asks of every data set, each with its answer and what to do about it. */
export function qualityChecks(facts: CheckFacts): Check[] {
  return [
    checkOneD(facts.facts),
    checkStuck(facts.facts),
    checkHalves(facts.segments, facts.common),
    checkShort(facts.facts),
    checkPixels(facts),
  ].filter((check) => check !== null);
}

/**
 * Do all tracks have one D? H = Σ z_m², each track's score against the common fit; H/c has χ² with (M − 1)/c degrees of
 * freedom, c from the kurtosis of the scores. Devised for this product; size 3 to 5.5 % in simulations at the 5 % level.
 */
function checkOneD(all: readonly TrackFacts[]): Check | null {
  if (all.length < 3) return null;
  const c = all.reduce((sum, one) => sum + 2 + one.excess, 0) / all.length / 2;
  const h = all.reduce((sum, one) => sum + one.score ** 2, 0);
  const p = chiSquareTailOf((all.length - 1) / c, h / c);
  const known = all.flatMap((one) => (one.D === null ? [] : [one.D]));
  const range = known.length > 0 ? quartiles(known) : null;
  if (p >= UNLIKELY) {
    return { code: 'one-d', level: 'fine', p, message: 'The tracks agree on one diffusion coefficient.' };
  }
  return {
    code: 'one-d',
    level: 'look',
    p,
    message: `The tracks do not agree on one D${range ? ` (half of them lie between ${range[0]} and ${range[1]} µm²/s)` : ''}: there may be several kinds of particle, or several surroundings. Look at D track by track before quoting the average.`,
  };
}

function checkStuck(all: readonly TrackFacts[]): Check | null {
  const able = all.filter((one) => one.displacements >= SHORT);
  if (able.length === 0) return null;
  const stuck = able.filter((one) => one.stuck).length;
  if (stuck === 0)
    return {
      code: 'stuck',
      level: 'fine',
      p: null,
      message: 'No track is stuck: all move beyond the localisation error.',
    };
  return {
    code: 'stuck',
    level: stuck > 0.1 * able.length && all.length > 1 ? 'look' : 'fine',
    p: null,
    message: `${stuck} of ${able.length} tracks show no motion beyond the localisation error; they count in D as all others do. If these particles stick to the glass, leave them out with that reason.`,
  };
}

/** D of the first and the second half of every track: focus, bleaching or temperature may have changed. */
function checkHalves(
  segments: readonly Segment[],
  { interval, blurFraction, drift }: CommonFit,
): Check | null {
  const part = (from: (n: number) => number, to: (n: number) => number) =>
    segments.flatMap((segment) => {
      const n = segment.displacements[0]!.length;
      if (n < 2 * SHORT) return [];
      const displacements = segment.displacements.map((steps, axis) =>
        steps.slice(from(n), to(n)).map((one) => one - (drift[axis] ?? 0)),
      );
      return [{ track: segment.track, displacements }];
    });
  const first = covarianceEstimate(
    part(
      () => 0,
      (n) => n >> 1,
    ),
    interval,
    blurFraction / 6,
  );
  const second = covarianceEstimate(
    part(
      (n) => n >> 1,
      (n) => n,
    ),
    interval,
    blurFraction / 6,
  );
  if (!first?.seD || !second?.seD) return null;
  const z = (second.D - first.D) / Math.hypot(first.seD, second.seD);
  const p = chiSquareTailOf(1, z * z);
  if (p >= UNLIKELY)
    return {
      code: 'halves',
      level: 'fine',
      p,
      message: 'D is the same in the first and the second half of the tracks.',
    };
  const change = Math.round(100 * (second.D / first.D - 1));
  return {
    code: 'halves',
    level: 'look',
    p,
    message: `D ${change > 0 ? 'rises' : 'falls'} by ${Math.abs(change)} % from the first to the second half of the tracks. Check temperature, focus and evaporation during the run.`,
  };
}

function checkShort(all: readonly TrackFacts[]): Check | null {
  if (all.length < 2) return null;
  const short = all.filter((one) => one.displacements < SHORT).length;
  if (short <= all.length / 2)
    return {
      code: 'short-tracks',
      level: 'fine',
      p: null,
      message: 'Most tracks are long enough to count on their own.',
    };
  return {
    code: 'short-tracks',
    level: 'look',
    p: null,
    message: `${short} of ${all.length} tracks have fewer than ${SHORT} displacements. They count in D, but fast particles leave the focus soonest, so D of short tracks leans towards them.`,
  };
}

/**
 * Do positions cling to whole pixels? Rayleigh test of the phase 2π·frac(position/pixel) over positions at least a pixel's
 * motion apart. Source: N. I. Fisher, Statistical Analysis of Circular Data, 1993 (from memory).
 */
function checkPixels({ tracks, pixelSize, common }: CheckFacts): Check | null {
  if (pixelSize === null || !(pixelSize > 0) || !(common.fit.delta > 0)) return null;
  // Frames after which a particle has moved by a pixel, root mean square per axis.
  const apart = Math.max(1, Math.ceil(pixelSize ** 2 / (2 * common.fit.delta)));
  let worst = 0;
  const axes = tracks[0]?.origin.length ?? 0;
  for (let axis = 0; axis < axes; axis++) {
    let cos = 0;
    let sin = 0;
    let n = 0;
    for (const track of tracks) {
      for (let i = 0; i < track.frames.length; i += apart) {
        const phase = (2 * Math.PI * (track.origin[axis]! + track.axes[axis]![i]!)) / pixelSize;
        cos += Math.cos(phase);
        sin += Math.sin(phase);
        n += 1;
      }
    }
    if (n >= 20) worst = Math.max(worst, (cos * cos + sin * sin) / n);
  }
  if (worst === 0) return null;
  const p = Math.min(1, axes * Math.exp(-worst));
  if (p >= UNLIKELY)
    return { code: 'pixel-locking', level: 'fine', p, message: 'Positions do not cling to whole pixels.' };
  return {
    code: 'pixel-locking',
    level: 'look',
    p,
    message:
      'Positions cling to certain places within a pixel, so the localisation is biased. Check how positions were computed; slow motion suffers most.',
  };
}

function quartiles(values: readonly number[]): [string, string] {
  const sorted = [...values].sort((a, b) => a - b);
  const half = sorted.length >> 1;
  const text = (value: number) => Number(value.toPrecision(2)).toString();
  return [text(median(sorted.slice(0, Math.max(1, half)))), text(median(sorted.slice(half)))];
}
