import type { Trajectories } from '../types';
import type { PathPreview } from './types';

const MOST_TRACKS = 60;
const MOST_POINTS = 400;

/** Some of the paths in the plane, thinned evenly, so that a person sees at once whether the columns are right. */
export function previewPaths(data: Omit<Trajectories, 'hash'>): PathPreview {
  const clock = data.time ?? data.frame!;
  const rows: number[][] = data.trackIds.map(() => []);
  for (let row = 0; row < data.track.length; row++) {
    if (data.axes.every((axis) => !Number.isNaN(axis[row]!))) rows[data.track[row]!]!.push(row);
  }
  const every = Math.max(1, Math.ceil(rows.length / MOST_TRACKS));
  const tracks = rows.flatMap((own, at) => {
    if (at % every !== 0 || own.length === 0) return [];
    own.sort((a, b) => clock[a]! - clock[b]!);
    const thin = Math.max(1, Math.ceil(own.length / MOST_POINTS));
    const kept = own.filter((_, i) => i % thin === 0 || i === own.length - 1);
    return [
      {
        id: data.trackIds[at]!,
        x: kept.map((row) => data.axes[0]![row]!),
        // One axis only: draw it against time, so that a path is still to be seen.
        y: kept.map((row) => (data.axes[1] ? data.axes[1][row]! : clock[row]!)),
      },
    ];
  });
  return { tracks, shown: tracks.length, of: rows.filter((own) => own.length > 0).length };
}
