import type { Track } from './prepare';

/** Between two positions with nothing known of what lies between: no displacement is ever taken across it. */
export const CUT = 0x7fffffff;

/** Displacements between neighbouring positions of one track, gaps included. */
export interface Steps {
  /** Index of the track. */
  readonly track: number;
  readonly reading: number;
  /** Frame of the first position in the reading's own count. */
  readonly start: number;
  /** Frames from one position to the next: 1, more across a gap, or CUT. */
  readonly gap: Int32Array;
  /** One array an axis, µm, as long as `gap`. */
  readonly axes: readonly Float64Array[];
}

export function stepsOf(tracks: readonly Track[]): Steps[] {
  return tracks.map((track, index) => {
    const count = Math.max(0, track.frames.length - 1);
    return {
      track: index,
      reading: track.reading,
      start: track.start,
      gap: Int32Array.from({ length: count }, (_, i) => track.frames[i + 1]! - track.frames[i]!),
      axes: track.axes.map((axis) => Float64Array.from({ length: count }, (_, i) => axis[i + 1]! - axis[i]!)),
    };
  });
}
