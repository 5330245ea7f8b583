/** Frame numbers from measured times. */

/** Times of one track, ascending, seconds. */
export type TrackTimes = Float64Array;

export interface FrameTiming {
  /** Frame interval, seconds. */
  readonly interval: number;
  /** Largest and root-mean-square deviation of a time from its frame, in frame intervals. */
  readonly worst: number;
  readonly rms: number;
}

/** Times are regular when none is further off its frame, and all together no further, than these parts of an interval. */
export const REGULAR_WORST = 0.1;
export const REGULAR_RMS = 0.02;

/**
 * Frame interval: the median positive difference within tracks, then refined by least squares over whole tracks, because
 * times written with few digits (0.04189, 0.08379 …) would otherwise drift off by frames in a long track. Where so many
 * frames are missing that the median spans several of them, a part of it, or the smallest difference, is what fits.
 * @param tracks - times of each track, seconds, ascending.
 * @returns null when no track has two distinct times.
 */
export function frameTiming(tracks: readonly TrackTimes[], given: number | null): FrameTiming | null {
  if (given !== null) return judge(tracks, given);
  const differences: number[] = [];
  for (const times of tracks) {
    for (let i = 1; i < times.length; i++) {
      const step = times[i]! - times[i - 1]!;
      if (step > 0) differences.push(step);
    }
  }
  if (differences.length === 0) return null;
  const middle = median(differences);
  const first = judge(tracks, refine(tracks, middle));
  if (isRegular(first)) return first;
  for (const guess of [middle / 2, middle / 3, middle / 4, differences[0]!]) {
    const other = judge(tracks, refine(tracks, guess));
    if (isRegular(other)) return other;
  }
  return first;
}

export function isRegular(timing: FrameTiming): boolean {
  return timing.worst <= REGULAR_WORST && timing.rms <= REGULAR_RMS;
}

function judge(tracks: readonly TrackTimes[], interval: number): FrameTiming {
  let worst = 0;
  let sum = 0;
  let count = 0;
  for (const times of tracks) {
    const start = times[0] ?? 0;
    for (const time of times) {
      const frames = (time - start) / interval;
      const off = Math.abs(frames - Math.round(frames));
      worst = Math.max(worst, off);
      sum += off * off;
      count += 1;
    }
  }
  return { interval, worst, rms: count > 0 ? Math.sqrt(sum / count) : 0 };
}

function refine(tracks: readonly TrackTimes[], first: number): number {
  let numerator = 0;
  let denominator = 0;
  for (const times of tracks) {
    let frame = 0;
    for (let i = 1; i < times.length; i++) {
      frame += Math.round((times[i]! - times[i - 1]!) / first);
      numerator += frame * (times[i]! - times[0]!);
      denominator += frame * frame;
    }
  }
  const refined = denominator > 0 ? numerator / denominator : first;
  // Twelve digits: what the sums add beyond that is rounding, and 0.1 should stay 0.1.
  return Number(refined.toPrecision(12));
}

/** Median of a non-empty list; the list is sorted in place. */
export function median(values: number[]): number {
  values.sort((a, b) => a - b);
  const middle = values.length >> 1;
  return values.length % 2 === 1 ? values[middle]! : (values[middle - 1]! + values[middle]!) / 2;
}
