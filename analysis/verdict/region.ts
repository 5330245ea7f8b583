import { CHI2_95_ONE, profileInterval } from '../estimators/profile-interval';
import type { Shape, TwoParameterFit } from '../estimators/likelihood';
import { findRoot } from '../fit/minimise';
import type { Spectrum } from '../spectrum/spectrum';

/** A model λ = δ·a(p) + s·b with one shape parameter p, and its best fit. */
export interface ShapedModel {
  readonly spectrum: Spectrum;
  readonly b: Shape;
  readonly knownS: number | null;
  /** By which likelihood ratios are divided. */
  readonly dispersion: number;
  readonly shapeAt: (p: number) => Shape;
  readonly fitAt: (p: number) => TwoParameterFit;
  readonly best: number;
  /** Limits between which p was looked for. */
  readonly lowest: number;
  readonly highest: number;
}

/** Where along p the region of 95 % likelihood lies, and how far δ reaches at each p. */
export interface Region {
  /** null where the region goes on beyond the limits of p. */
  readonly lo: number | null;
  readonly hi: number | null;
  readonly at: readonly {
    readonly p: number;
    readonly delta: readonly [number, number];
    /** σ² at the two ends, µm². */
    readonly s: readonly [number, number];
  }[];
}

/** Values of p at which the reach of δ is looked at. */
const STATIONS = 15;

/**
 * The region {−2lnL − min ≤ 3.84φ} over (δ, p), σ² at its best. The range of any quantity over it is that quantity's
 * profile-likelihood interval, so one region serves D, a size, a speed, or K.
 */
export function regionOf(model: ShapedModel): Region {
  const least = model.fitAt(model.best).minus2LogL;
  const room = CHI2_95_ONE * model.dispersion;
  const beyond = (p: number) => model.fitAt(p).minus2LogL - least - room;
  const lo = beyond(model.lowest) > 0 ? findRoot(beyond, model.lowest, model.best, 1e-6) : null;
  const hi = beyond(model.highest) > 0 ? findRoot(beyond, model.best, model.highest, 1e-6) : null;
  const from = lo ?? model.lowest;
  const to = hi ?? model.highest;
  const stations = [
    model.best,
    ...Array.from({ length: STATIONS }, (_, i) => from + ((to - from) * (i + 0.5)) / STATIONS),
  ].sort((a, b) => a - b);
  const at = stations.flatMap((p) => {
    const fit = model.fitAt(p);
    const left = least + room - fit.minus2LogL;
    if (!(left > 0) || !(fit.delta > 0)) return [];
    const ends = profileInterval(model.spectrum, model.shapeAt(p), model.b, fit, model.knownS, left);
    return [{ p, delta: [ends.lo ?? 0, ends.hi ?? Infinity] as const, s: [ends.sLo, ends.sHi] as const }];
  });
  return { lo, hi, at };
}

/**
 * Range of a quantity over the region. @param quantity - rises with δ.
 * Between stations the edge is followed by a parabola through the outermost one and its neighbours.
 */
export function rangeOver(
  region: Region,
  quantity: (delta: number, p: number, s: number) => number,
): { lo: number | null; hi: number | null } {
  if (region.at.length === 0) return { lo: null, hi: null };
  const lows = region.at.map(({ p, delta, s }) => quantity(delta[0], p, s[0]));
  const highs = region.at.map(({ p, delta, s }) => quantity(delta[1], p, s[1]));
  const lo = -crest(lows.map((value) => -value));
  const hi = crest(highs);
  return { lo: lo > 0 && Number.isFinite(lo) ? lo : null, hi: Number.isFinite(hi) ? hi : null };
}

function crest(values: readonly number[]): number {
  let at = 0;
  for (let i = 1; i < values.length; i++) if (values[i]! > values[at]!) at = i;
  const [a, b, c] = [values[at - 1], values[at]!, values[at + 1]];
  if (a === undefined || c === undefined || !Number.isFinite(a + b + c)) return b;
  const bend = a - 2 * b + c;
  return bend < 0 ? b - (a - c) ** 2 / (8 * bend) : b;
}
