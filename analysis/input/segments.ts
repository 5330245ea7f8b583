import { CUT, type Steps } from './steps';

/** Displacements of a run of consecutive frames: one array an axis, micrometres, all of the same length ≥ 1. */
export interface Segment {
  readonly track: number;
  readonly displacements: readonly Float64Array[];
}

/**
 * Series longer than this are cut: a sine transform of a million points would take minutes, and the one displacement
 * lost at each cut in 16,384 is nothing.
 */
export const LONGEST_SERIES = 16_384;

/** Cuts tracks at their gaps. A displacement exists only between frames f and f + 1 that are both present. */
export function segmentsOf(steps: readonly Steps[]): { segments: Segment[]; gaps: number } {
  const segments: Segment[] = [];
  let gaps = 0;
  for (const { track, gap, axes } of steps) {
    let start = 0;
    for (let i = 0; i <= gap.length; i++) {
      const goesOn = i < gap.length && gap[i] === 1 && i - start < LONGEST_SERIES;
      if (goesOn) continue;
      if (i < gap.length && gap[i] !== 1 && gap[i] !== CUT) gaps += 1;
      if (i > start) segments.push({ track, displacements: axes.map((axis) => axis.slice(start, i)) });
      // A series that is only too long goes on with the displacement after the one that is left out here.
      start = i + 1;
    }
  }
  return { segments, gaps };
}

/** Positions are written with a few digits, so equal displacements differ by rounding: this part of their mean square. */
const ROUNDING = 1e-18;

/** Whether two or more displacements are all the same: a column of numbers that count, not a motion. */
export function isUniform(segments: readonly Segment[]): boolean {
  const dims = segments[0]?.displacements.length ?? 0;
  const count = segments.reduce((total, segment) => total + segment.displacements[0]!.length, 0);
  if (count < 2) return false;
  for (let axis = 0; axis < dims; axis++) {
    const steps = segments.map((segment) => segment.displacements[axis]!);
    const mean = steps.reduce((total, own) => total + own.reduce((sum, one) => sum + one, 0), 0) / count;
    for (const own of steps) {
      // The first displacement that differs settles it.
      if (own.some((one) => (one - mean) ** 2 > ROUNDING * mean * mean)) return false;
    }
  }
  return true;
}
