import type { Trajectories } from '../types';

/** Rows of one track, sorted by time (or frame); `frames` and `start` are filled in once the interval is known. */
export interface RawTrack {
  readonly reading: number;
  readonly id: string;
  readonly start: number;
  readonly frames: Int32Array;
  /** Seconds, or frame numbers where the file counts frames. */
  readonly times: Float64Array;
  readonly axes: readonly Float64Array[];
}

/** Beyond this a coordinate or time is no measurement, and the fourth powers that are summed would overflow. */
const LARGEST = 1e60;

/**
 * Groups a reading's rows by track and sorts them. A row with an unreadable position is a gap.
 * @returns tracks in order of first appearance, and how many rows were dropped for which reason.
 */
export function collectRows(reading: Trajectories, index: number) {
  const clock = reading.time ?? reading.frame;
  if (!clock) throw new TypeError('a reading needs times or frames');
  const rows: number[][] = reading.trackIds.map(() => []);
  let unreadable = 0;
  let untimed = 0;
  for (let row = 0; row < reading.track.length; row++) {
    if (reading.axes.some((axis) => !(Math.abs(axis[row]!) <= LARGEST))) unreadable += 1;
    else if (!(Math.abs(clock[row]!) <= LARGEST)) untimed += 1;
    else rows[reading.track[row]!]!.push(row);
  }
  const tracks: RawTrack[] = [];
  for (const [at, own] of rows.entries()) {
    if (own.length === 0) continue;
    // A stable sort keeps the file's order among equal times, so the outcome never depends on the engine.
    own.sort((a, b) => clock[a]! - clock[b]! || a - b);
    tracks.push({
      reading: index,
      id: reading.trackIds[at]!,
      start: 0,
      frames: new Int32Array(0),
      times: Float64Array.from(own, (row) => clock[row]!),
      axes: reading.axes.map((axis) => Float64Array.from(own, (row) => axis[row]!)),
    });
  }
  return { tracks, unreadable, untimed };
}
