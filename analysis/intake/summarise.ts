import { frameTiming } from '../input/frame-interval';
import type { Trajectories } from '../types';
import type { ReadingSummary } from './types';

/** Counts what was read. Rows without a whole position count as rows only. */
export function summarise(data: Omit<Trajectories, 'hash'>, badRows: number): ReadingSummary {
  const byTrack = timesByTrack(data).filter((times) => times.length > 0);
  const interval = data.frameInterval ?? (data.time && (frameTiming(byTrack, null)?.interval ?? null));
  const unit = data.time ? (interval ?? 1) : 1;
  const moments = new Set<number>();
  let [gaps, missingFrames, longest, shortest] = [0, 0, 0, Infinity];
  for (const times of byTrack) {
    let length = 0;
    for (let i = 0; i < times.length; i++) {
      if (i > 0 && times[i] === times[i - 1]) continue;
      length += 1;
      moments.add(times[i]!);
      const skipped = i === 0 ? 0 : Math.round((times[i]! - times[i - 1]!) / unit) - 1;
      if (skipped < 1) continue;
      gaps += 1;
      missingFrames += skipped;
    }
    longest = Math.max(longest, length);
    shortest = Math.min(shortest, length);
  }
  return {
    rows: data.track.length,
    tracks: byTrack.length,
    frames: moments.size,
    longestTrackFrames: longest,
    shortestTrackFrames: byTrack.length === 0 ? 0 : shortest,
    gaps,
    missingFrames,
    frameInterval: interval,
    dims: data.axes.length,
    badRows,
    bounds: data.axes.map(boundsOf),
  };
}

/** Times (or frames) of each track's whole positions, ascending; one array a track, in the order of `trackIds`. */
export function timesByTrack(data: Omit<Trajectories, 'hash'>): Float64Array[] {
  const clock = data.time ?? data.frame!;
  const lists: number[][] = data.trackIds.map(() => []);
  for (let row = 0; row < data.track.length; row++) {
    if (isWhole(data, row)) lists[data.track[row]!]!.push(clock[row]!);
  }
  return lists.map((list) => Float64Array.from(list).sort());
}

/** Whether every coordinate of a row could be read. */
export function isWhole(data: Omit<Trajectories, 'hash'>, row: number): boolean {
  for (const axis of data.axes) if (Number.isNaN(axis[row])) return false;
  return true;
}

function boundsOf(axis: Float64Array): readonly [number, number] {
  let low = Infinity;
  let high = -Infinity;
  for (const value of axis) {
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return low <= high ? [low, high] : [0, 0];
}
