import { requirePositive } from '../check';

/**
 * Two liquids side by side in a flat channel: particles of one stream diffuse into the other while both flow on. The
 * speed is taken as even across the width, and mixing along the flow is left out.
 */
export interface Channel {
  /** Width w across which particles diffuse, µm. */
  readonly width: number;
  /** Residence time, s: length of the channel over mean speed. */
  readonly time: number;
  /** Share of the width that the particles' own stream has at the inlet; ½ unless given. */
  readonly stream?: number;
}

/**
 * Share of the particles that has left its own stream by the outlet:
 * (1 − f) − (2/(π²f)) Σ sin²(nπf)/n² · exp(−n²π²Dt/w²), between reflecting walls; for f = ½
 * ½ − (4/π²) Σ_{n odd} exp(−n²π²Dt/w²)/n². Never more than 1 − f.
 * Source: Crank, The Mathematics of Diffusion (2nd ed. 1975), 2.2.4 and 4.3.6, integrated over the other stream.
 * @param D - µm²/s.
 */
export function shareCrossed(D: number, { width, time, stream = 0.5 }: Channel): number {
  requirePositive('width', width);
  if (!(D >= 0 && Number.isFinite(D))) throw new RangeError(`D must be zero or more, not ${D}`);
  if (!(time >= 0 && Number.isFinite(time))) throw new RangeError(`time must be zero or more, not ${time}`);
  if (!(stream > 0 && stream < 1)) throw new RangeError(`stream must lie between 0 and 1, not ${stream}`);
  const s = (D * time) / (width * width);
  const nearest = Math.min(stream, 1 - stream);
  // No particle has met a wall yet: two half spaces, √(Dt/π) of the particles a unit of face.
  if (s < nearest ** 2 / 40) return Math.sqrt(s / Math.PI) / stream;
  let sum = 0;
  for (let n = 1; n * n * Math.PI ** 2 * s < 40; n++)
    sum += (Math.sin(n * Math.PI * stream) / n) ** 2 * Math.exp(-n * n * Math.PI ** 2 * s);
  return 1 - stream - (2 * sum) / (Math.PI ** 2 * stream);
}

export interface Separated {
  readonly fast: number;
  readonly slow: number;
  /** fast/slow: how much the other stream is enriched in the faster species; Infinity when no slow one crossed. */
  readonly enrichment: number;
  /** Share of the faster species among what crossed, when as many of both came in. */
  readonly purity: number;
}

/** What of two species has crossed by the outlet. @param fast - the larger D, µm²/s. */
export function separation(fast: number, slow: number, channel: Channel): Separated {
  const a = shareCrossed(fast, channel);
  const b = shareCrossed(slow, channel);
  return { fast: a, slow: b, enrichment: a / b, purity: a + b > 0 ? a / (a + b) : 0.5 };
}

/** Residence time at which the shares of two species that crossed differ most, s. */
export function bestResidence(fast: number, slow: number, channel: Omit<Channel, 'time'>): number {
  requirePositive('D', slow);
  if (!(fast > slow)) throw new RangeError('the first species must be the faster one');
  const gain = (time: number) =>
    shareCrossed(fast, { ...channel, time }) - shareCrossed(slow, { ...channel, time });
  const unit = channel.width ** 2;
  const grid = Array.from({ length: 400 }, (_, i) =>
    Math.exp(Math.log((1e-4 * unit) / fast) + (i / 399) * Math.log((1e5 * fast) / slow)),
  );
  let at = 0;
  grid.forEach((time, i) => {
    if (gain(time) > gain(grid[at]!)) at = i;
  });
  let lo = grid[Math.max(0, at - 1)]!;
  let hi = grid[Math.min(grid.length - 1, at + 1)]!;
  // One hump between the two neighbours: thirds close in on it.
  for (let i = 0; i < 100 && hi - lo > 1e-10 * hi; i++) {
    const third = (hi - lo) / 3;
    if (gain(lo + third) < gain(hi - third)) lo += third;
    else hi -= third;
  }
  return (lo + hi) / 2;
}
