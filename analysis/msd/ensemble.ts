import type { Track } from '../input/prepare';

/** Sums that the ensemble MSD is made of; arrays are parallel to `lags`. */
export interface MsdSums {
  readonly lags: readonly number[];
  readonly pairs: readonly number[];
  /** Mean squared displacement, one array an axis, µm². */
  readonly perAxis: readonly (readonly number[])[];
  readonly total: readonly number[];
  /** Pairs of each track, one array a lag: what the error needs. */
  readonly trackPairs: readonly Int32Array[];
}

/**
 * Ensemble MSD over all pairs of measured positions that lie exactly `lag` frames apart; every pair has the same weight.
 * Gaps cost only the pairs that are missing. Lags without a pair are left out.
 * Source: Qian, Sheetz & Elson 1991, Biophys. J. 60:910.
 */
export function ensembleMsd(tracks: readonly Track[], dims: number, lags: readonly number[]): MsdSums {
  const kept: number[] = [];
  const pairs: number[] = [];
  const perAxis: number[][] = Array.from({ length: dims }, () => []);
  const total: number[] = [];
  const trackPairs: Int32Array[] = [];
  for (const lag of lags) {
    const sums = new Float64Array(dims);
    const counts = new Int32Array(tracks.length);
    let count = 0;
    for (const [index, track] of tracks.entries()) {
      const own = addPairs(track, lag, sums);
      counts[index] = own;
      count += own;
    }
    if (count === 0) continue;
    kept.push(lag);
    pairs.push(count);
    trackPairs.push(counts);
    let all = 0;
    for (let axis = 0; axis < dims; axis++) {
      perAxis[axis]!.push(sums[axis]! / count);
      all += sums[axis]!;
    }
    total.push(all / count);
  }
  return { lags: kept, pairs, perAxis, total, trackPairs };
}

/** Adds the squared displacements of one track at one lag; two pointers, because frames may be missing. */
function addPairs(track: Track, lag: number, sums: Float64Array): number {
  const { frames, axes } = track;
  let count = 0;
  for (let i = 0, j = 0; i < frames.length; i++) {
    const wanted = frames[i]! + lag;
    while (j < frames.length && frames[j]! < wanted) j += 1;
    if (j === frames.length) break;
    if (frames[j] !== wanted) continue;
    count += 1;
    for (let axis = 0; axis < axes.length; axis++) sums[axis]! += (axes[axis]![j]! - axes[axis]![i]!) ** 2;
  }
  return count;
}

/** Lags to show: all up to 50, then about 30 a decade, up to half of the longest track. */
export function lagsToShow(tracks: readonly Track[]): number[] {
  let span = 0;
  for (const track of tracks) span = Math.max(span, track.frames.at(-1) ?? 0);
  const last = Math.max(1, Math.floor((span + 1) / 2), Math.min(span, 5));
  const lags: number[] = [];
  for (let lag = 1; lag <= last; lag = lag < 50 ? lag + 1 : Math.max(lag + 1, Math.round(lag * 1.08)))
    lags.push(lag);
  return lags;
}
