import { seededRandom } from '../random';
import { CUT, type Steps } from './steps';

/** Gaps of more missing frames than this split a track; what is known of their ends says little about their middle. */
export const LONGEST_FILLED = 5;
/** Displacements on either side that a gap's filling is made to agree with; beyond, correlation is gone. */
const NEIGHBOURS = 6;

export interface FreeModel {
  /** D·Δt, µm². */
  readonly delta: number;
  /** σ², µm². */
  readonly s: number;
  /** Exposure as a fraction of the interval. */
  readonly blurFraction: number;
  /** Common displacement per frame, µm, one an axis. */
  readonly drift: readonly number[];
}

/**
 * Fills each short gap with one random draw from the fitted free model, given the displacement across the gap and its
 * neighbours. Used for the test of the regime only, never for D: cut into runs, a track with gaps can hardly show what it
 * does over long times; filled from the free model, it can, and free data stay free data (so false alarms stay as rare as
 * they are). The draw follows from the data themselves, so that the same data give the same verdict.
 * Devised for this product; checked by simulation.
 */
export function fillGaps(
  steps: readonly Steps[],
  model: FreeModel,
): { steps: readonly Steps[]; filled: number } {
  const filler = new Filler(model);
  let filled = 0;
  const done = steps.map((own) => {
    const gaps = own.gap.filter((width) => width > 1 && width <= LONGEST_FILLED + 1).length;
    if (gaps === 0) return own;
    filled += gaps;
    return filler.fill(own);
  });
  return filled === 0 ? { steps, filled } : { steps: done, filled };
}

/** What a gap of some width with some neighbours asks for; the same for all gaps of that kind. */
interface Gain {
  /** Rows of the gap: weights of the observed values. width × (left + 1 + right). */
  readonly weights: readonly Float64Array[];
}

class Filler {
  private readonly c0: number;
  private readonly c1: number;
  private readonly gains = new Map<number, Gain>();

  constructor(private readonly model: FreeModel) {
    const blur = model.blurFraction / 6;
    this.c0 = 2 * model.delta * (1 - 2 * blur) + 2 * model.s;
    const c1 = 2 * blur * model.delta - model.s;
    // The fit keeps the spectrum positive for the lengths that it saw; any length needs |c1| ≤ c0/2.
    this.c1 = Math.max(-0.4999 * this.c0, Math.min(0.4999 * this.c0, c1));
  }

  fill(own: Steps): Steps {
    const expanded = expand(own);
    const { gap, firstOf } = expanded;
    const axes = expanded.axes;
    for (const [at, width] of firstOf) {
      const left = Math.min(NEIGHBOURS, countBack(gap, at));
      const right = Math.min(NEIGHBOURS, countOn(gap, at + width, firstOf));
      const gain = this.gainOf(left, width, right);
      for (const [axis, values] of axes.entries()) {
        const drift = this.model.drift[axis] ?? 0;
        // Until it is filled the first place of the gap holds the displacement across it.
        const across = values[at]! - width * drift;
        const known = new Float64Array(left + 1 + right);
        for (let i = 0; i < left; i++) known[i] = values[at - left + i]! - drift;
        known[left] = across;
        for (let i = 0; i < right; i++) known[left + 1 + i] = values[at + width + i]! - drift;
        const draw = this.draw(left + width + right, this.seedOf(own, at, axis, known), across < 0 ? -1 : 1);
        // Known values less what the draw has in their place.
        for (let i = 0; i < left; i++) known[i]! -= draw[i]!;
        for (let i = 0; i < width; i++) known[left]! -= draw[left + i]!;
        for (let i = 0; i < right; i++) known[left + 1 + i]! -= draw[left + width + i]!;
        for (let row = 0; row < width; row++) {
          let value = draw[left + row]! + drift;
          for (let i = 0; i < known.length; i++) value += gain.weights[row]![i]! * known[i]!;
          values[at + row] = value;
        }
      }
    }
    return { ...own, gap, axes };
  }

  /** Depends on what no shift, mirror, change of units or order of tracks changes. */
  private seedOf(own: Steps, at: number, axis: number, known: Float64Array): number {
    const unit = Math.sqrt(this.c0) / 1000;
    const parts = [own.gap.length, at, axis, ...known].map((value, i) =>
      i < 3 ? value : Math.round(Math.abs(value) / unit),
    );
    let hash = 0x811c9dc5;
    for (const part of parts) hash = Math.imul(hash ^ (part | 0), 0x01000193) ^ (hash >>> 15);
    return hash >>> 0;
  }

  /** A series of the model: the tridiagonal covariance has a Cholesky factor of two diagonals. */
  private draw(length: number, seed: number, sign: number): Float64Array {
    const random = seededRandom(seed);
    const series = new Float64Array(length);
    let diagonal = 0;
    let before = 0;
    for (let i = 0; i < length; i++) {
      const below = i === 0 ? 0 : this.c1 / diagonal;
      diagonal = Math.sqrt(Math.max(this.c0 - below * below, 0));
      const now = random.gaussian();
      series[i] = sign * (below * before + diagonal * now);
      before = now;
    }
    return series;
  }

  private gainOf(left: number, width: number, right: number): Gain {
    const key = (left * 8 + width) * 8 + right;
    const kept = this.gains.get(key);
    if (kept) return kept;
    const n = left + width + right;
    const m = left + 1 + right;
    // H picks the known displacements and adds up those of the gap.
    const seen = (i: number) => (i < left ? i : i < left + width ? left : i - width + 1);
    const covariance = (i: number, j: number) => (i === j ? this.c0 : Math.abs(i - j) === 1 ? this.c1 : 0);
    const matrix = Array.from({ length: m }, () => new Float64Array(m));
    const cross = Array.from({ length: width }, () => new Float64Array(m));
    for (let i = 0; i < n; i++) {
      for (let j = Math.max(0, i - 1); j <= Math.min(n - 1, i + 1); j++) {
        const c = covariance(i, j);
        matrix[seen(i)]![seen(j)]! += c;
        if (i >= left && i < left + width) cross[i - left]![seen(j)]! += c;
      }
    }
    const gain = { weights: solveSymmetric(matrix, cross) };
    this.gains.set(key, gain);
    return gain;
  }
}

/** Rows X with X·A = B for a symmetric positive A (Cholesky). */
function solveSymmetric(a: readonly Float64Array[], rows: readonly Float64Array[]): Float64Array[] {
  const m = a.length;
  const l = Array.from({ length: m }, () => new Float64Array(m));
  for (let i = 0; i < m; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = a[i]![j]!;
      for (let k = 0; k < j; k++) sum -= l[i]![k]! * l[j]![k]!;
      l[i]![j] = i === j ? Math.sqrt(Math.max(sum, Number.MIN_VALUE)) : sum / l[j]![j]!;
    }
  }
  return rows.map((row) => {
    const x = row.slice();
    for (let i = 0; i < m; i++) {
      for (let k = 0; k < i; k++) x[i]! -= l[i]![k]! * x[k]!;
      x[i]! /= l[i]![i]!;
    }
    for (let i = m - 1; i >= 0; i--) {
      for (let k = i + 1; k < m; k++) x[i]! -= l[k]![i]! * x[k]!;
      x[i]! /= l[i]![i]!;
    }
    return x;
  });
}

/** Makes room: every short gap becomes as many places as it has frames, the first of which holds the whole displacement. */
function expand(own: Steps): { gap: Int32Array; axes: Float64Array[]; firstOf: Map<number, number> } {
  const short = (width: number) => width > 1 && width !== CUT && width <= LONGEST_FILLED + 1;
  const firstOf = new Map<number, number>();
  let length = 0;
  for (const width of own.gap) length += short(width) ? width : 1;
  const gap = new Int32Array(length);
  const axes = own.axes.map(() => new Float64Array(length));
  for (let i = 0, at = 0; i < own.gap.length; i++) {
    const width = own.gap[i]!;
    const places = short(width) ? width : 1;
    if (places > 1) firstOf.set(at, width);
    for (let place = 0; place < places; place++) gap[at + place] = places > 1 ? 1 : width;
    for (const [axis, values] of own.axes.entries()) axes[axis]![at] = values[i]!;
    at += places;
  }
  return { gap, axes, firstOf };
}

function countBack(gap: Int32Array, at: number): number {
  let count = 0;
  while (count < NEIGHBOURS && at - count - 1 >= 0 && gap[at - count - 1] === 1) count += 1;
  return count;
}

/** Up to the next gap, which is not filled yet. */
function countOn(gap: Int32Array, from: number, firstOf: ReadonlyMap<number, number>): number {
  let count = 0;
  while (
    count < NEIGHBOURS &&
    from + count < gap.length &&
    gap[from + count] === 1 &&
    !firstOf.has(from + count)
  )
    count += 1;
  return count;
}
