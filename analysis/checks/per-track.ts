import { covarianceEstimate } from '../estimators/covariance';
import { fitTwo, noiseShape, type TwoParameterFit } from '../estimators/likelihood';
import type { Segment } from '../input/segments';
import { spectrumOf } from '../spectrum/spectrum';
import { sineTransform } from '../spectrum/sine-transform';
import { freeShape } from '../verdict/free-fit';
import { fitOne } from '../estimators/likelihood';

/** What one track says on its own. Lengths µm, times s. */
export interface TrackFacts {
  /** Index of the track. */
  readonly track: number;
  readonly displacements: number;
  /** Covariance-based estimate and its standard error, µm²/s; null when no two displacements follow each other. */
  readonly D: number | null;
  readonly se: number | null;
  /** Whether nothing but localisation error is seen (5 % of moving tracks at the boundary pass for stuck). */
  readonly stuck: boolean;
  /** Standard score of the track's spread against the common fit. */
  readonly score: number;
  /** Excess kurtosis of that score in free diffusion. */
  readonly excess: number;
}

export interface CommonFit {
  readonly fit: TwoParameterFit;
  readonly blurFraction: number;
  /** Common displacement per frame to take off, µm an axis. */
  readonly drift: readonly number[];
  readonly interval: number;
}

/** 5 %, one-sided at the boundary D = 0. */
const MOVES_FROM = 2.71;

/** @param segments - of all tracks; those of one track stand together. */
export function trackFacts(segments: readonly Segment[], dims: number, common: CommonFit): TrackFacts[] {
  const byTrack = new Map<number, Segment[]>();
  for (const segment of segments) {
    const own = byTrack.get(segment.track);
    if (own) own.push(segment);
    else byTrack.set(segment.track, [segment]);
  }
  const shapes = new Map<number, { a: Float64Array; b: Float64Array }>();
  return [...byTrack].map(([track, own]) => factsOf(track, own, dims, common, shapes));
}

function factsOf(
  track: number,
  segments: readonly Segment[],
  dims: number,
  { fit, blurFraction, drift, interval }: CommonFit,
  shapes: Map<number, { a: Float64Array; b: Float64Array }>,
): TrackFacts {
  const still = segments.map((segment) => ({
    ...segment,
    displacements: segment.displacements.map((steps, axis) => steps.map((one) => one - (drift[axis] ?? 0))),
  }));
  let score = 0;
  let squares = 0;
  let fourths = 0;
  for (const { displacements } of still) {
    const length = displacements[0]!.length;
    let shape = shapes.get(length);
    if (!shape) {
      const alone = spectrumOf([{ track, displacements }], dims);
      shape = { a: freeShape(alone, blurFraction)[0]!, b: noiseShape(alone)[0]! };
      shapes.set(length, shape);
    }
    const transformed = displacements.map((steps) => sineTransform(steps));
    for (let k = 0; k < length; k++) {
      const lambda = fit.delta * shape.a[k]! + fit.s * shape.b[k]!;
      const c = shape.a[k]! / lambda;
      const w = transformed.reduce((sum, own) => sum + own[k]! ** 2, 0) / lambda;
      score += c * (w - dims);
      squares += c * c;
      fourths += c ** 4;
    }
  }
  const cve = covarianceEstimate(still, interval, blurFraction / 6);
  return {
    track,
    displacements: segments.reduce((sum, segment) => sum + segment.displacements[0]!.length, 0),
    D: cve?.D ?? null,
    se: cve?.seD ?? null,
    stuck: isStuck(still, dims, blurFraction, cve),
    score: score / Math.sqrt(2 * dims * squares),
    excess: (12 * fourths) / (dims * squares * squares),
  };
}

/** Likelihood-ratio test of "localisation error only"; clearly moving tracks are not put to it. */
function isStuck(
  segments: readonly Segment[],
  dims: number,
  blurFraction: number,
  cve: { D: number; seD: number | null } | null,
): boolean {
  if (cve === null) return false;
  if (cve.seD !== null && cve.D > 4 * cve.seD) return false;
  const spectrum = spectrumOf(segments, dims);
  const b = noiseShape(spectrum);
  const moving = fitTwo(spectrum, freeShape(spectrum, blurFraction), b);
  return fitOne(spectrum, b).minus2LogL - moving.minus2LogL <= MOVES_FROM;
}
