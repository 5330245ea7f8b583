import type { Trajectories } from '../types';
import { isWhole } from './summarise';
import type { PathPreview } from './types';

const MOST_TRACKS = 60;
const MOST_POINTS = 400;

/** Some of the paths in the plane, thinned evenly, so that a person sees at once whether the columns are right. */
export function previewPaths(data: Omit<Trajectories, 'hash'>): PathPreview {
  const clock = data.time ?? data.frame!;
  const rows: number[][] = data.trackIds.map(() => []);
  for (let row = 0; row < data.track.length; row++) {
    if (isWhole(data, row)) rows[data.track[row]!]!.push(row);
  }
  const filled = rows.flatMap((own, at) => (own.length > 0 ? [{ own, id: data.trackIds[at]! }] : []));
  const every = Math.max(1, Math.ceil(filled.length / MOST_TRACKS));
  const tracks = filled
    .filter((_, at) => at % every === 0)
    .map(({ own, id }) => {
      own.sort((a, b) => clock[a]! - clock[b]!);
      // The last point is always kept, and one place is left for it.
      const thin = Math.max(1, Math.ceil((own.length - 1) / (MOST_POINTS - 1)));
      const kept = own.filter((_, i) => i % thin === 0 || i === own.length - 1);
      return {
        id,
        x: kept.map((row) => data.axes[0]![row]!),
        // One axis only: draw it against time, so that a path is still to be seen.
        y: kept.map((row) => (data.axes[1] ? data.axes[1][row]! : clock[row]!)),
      };
    });
  return { tracks, shown: tracks.length, of: filled.length };
}
