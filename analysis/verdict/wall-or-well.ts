import type { Track } from '../input/prepare';

/**
 * Whether confined particles meet walls or are pulled back: the spread alone cannot tell, the positions can. Excess kurtosis
 * per axis about the middle of each track is −1.2 between flat walls and 0 in a harmonic well (common values of the uniform
 * and the normal law); Gaussian localisation error changes the fourth cumulant of neither.
 */
export type Boundary = 'walls' | 'well' | 'unclear';

/** A track shorter than this many relaxation times has not seen its limits. */
const TIMES_NEEDED = 10;
/** Half-way between the two, and how many standard errors must lie between. */
const DIVIDE = -0.6;
const ERRORS_NEEDED = 1.645;
/** Pieces whose spread gives the standard error. */
const PIECES_NEEDED = 6;

/**
 * @param spread - standard deviation of the positions per axis without localisation error, µm, from the fit.
 * @param relaxation - 1/κ, frames.
 */
export function wallOrWell(
  tracks: readonly Track[],
  spread: number,
  relaxation: number,
): { readonly boundary: Boundary; readonly kurtosis: number | null } {
  const needed = Math.ceil(TIMES_NEEDED * relaxation);
  const pieces = tracks.flatMap((track) => cut(track, needed));
  if (pieces.length < PIECES_NEEDED) return { boundary: 'unclear', kurtosis: null };
  const sums = pieces.map((piece) => ({ m2: mean(piece, 2), m4: mean(piece, 4) }));
  const total = sums.reduce((all, one) => ({ m2: all.m2 + one.m2, m4: all.m4 + one.m4 }), { m2: 0, m4: 0 });
  const cumulant = (m2: number, m4: number, count: number) =>
    (m4 / count - 3 * (m2 / count) ** 2) / spread ** 4;
  const n = sums.length;
  const kurtosis = cumulant(total.m2, total.m4, n);
  // Jackknife over pieces.
  const left = sums.map((one) => cumulant(total.m2 - one.m2, total.m4 - one.m4, n - 1));
  const middle = left.reduce((sum, one) => sum + one, 0) / n;
  const error = Math.sqrt(((n - 1) / n) * left.reduce((sum, one) => sum + (one - middle) ** 2, 0));
  const boundary: Boundary =
    kurtosis + ERRORS_NEEDED * error < DIVIDE
      ? 'walls'
      : kurtosis - ERRORS_NEEDED * error > DIVIDE
        ? 'well'
        : 'unclear';
  return { boundary, kurtosis };
}

/** Pieces of one axis of a track, each long enough, about the middle of the whole track. */
function cut(track: Track, needed: number): Float64Array[] {
  const n = track.frames.length;
  if (n < needed || n < 4) return [];
  const count = Math.max(1, Math.min(Math.floor(n / needed), 40));
  return track.axes.flatMap((axis) => {
    const middle = axis.reduce((sum, one) => sum + one, 0) / n;
    const centred = axis.map((one) => one - middle);
    return Array.from({ length: count }, (_, i) =>
      centred.slice(Math.floor((i * n) / count), Math.floor(((i + 1) * n) / count)),
    );
  });
}

function mean(values: Float64Array, power: number): number {
  return values.reduce((sum, one) => sum + one ** power, 0) / values.length;
}
