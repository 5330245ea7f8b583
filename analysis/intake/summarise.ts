import { median } from '../input/frame-interval';
import type { Trajectories } from '../types';
import type { IntakeFailure, ReadingSummary } from './types';

/** A stated frame interval further than this from the times of the file contradicts them. */
const CONTRADICTION = 0.1;

/** Counts what was read, and holds a stated frame interval against the times. */
export function summarise(
  data: Omit<Trajectories, 'hash'>,
  badRows: number,
): { summary: ReadingSummary; contradiction: IntakeFailure | null } {
  const clock = data.time ?? data.frame!;
  const byTrack: number[][] = data.trackIds.map(() => []);
  const usable = (row: number) => data.axes.every((axis) => !Number.isNaN(axis[row]!));
  for (let row = 0; row < data.track.length; row++)
    if (usable(row)) byTrack[data.track[row]!]!.push(clock[row]!);
  const steps: number[] = [];
  for (const times of byTrack) {
    times.sort((a, b) => a - b);
    for (let i = 1; i < times.length; i++)
      if (times[i]! > times[i - 1]!) steps.push(times[i]! - times[i - 1]!);
  }
  const step = steps.length > 0 ? median(steps) : null;
  const contradiction = contradictionOf(data, step);
  const unit = data.time ? (data.frameInterval ?? step ?? 1) : 1;
  let gaps = 0;
  let missingFrames = 0;
  for (const one of steps) {
    const frames = Math.round(one / unit);
    if (frames > 1) {
      gaps += 1;
      missingFrames += frames - 1;
    }
  }
  const lengths = byTrack.map((times) => times.length).filter((length) => length > 0);
  return {
    contradiction,
    summary: {
      rows: data.track.length,
      tracks: lengths.length,
      frames: new Set(byTrack.flat()).size,
      longestTrackFrames: lengths.reduce((most, length) => Math.max(most, length), 0),
      shortestTrackFrames:
        lengths.length === 0 ? 0 : lengths.reduce((least, length) => Math.min(least, length)),
      gaps,
      missingFrames,
      frameInterval: data.frameInterval ?? (data.time && step !== null ? Number(step.toPrecision(10)) : null),
      dims: data.axes.length,
      badRows,
      bounds: data.axes.map(boundsOf),
    },
  };
}

function contradictionOf(data: Omit<Trajectories, 'hash'>, step: number | null): IntakeFailure | null {
  if (data.time === null || data.frameInterval === null || step === null) return null;
  if (Math.abs(step / data.frameInterval - 1) <= CONTRADICTION) return null;
  return {
    failed: true,
    code: 'frame-interval-contradicts',
    message: `The times in the file are ${Number(step.toPrecision(4))} s apart, but the stated frame interval is ${data.frameInterval} s. Leave the frame interval out, or choose the frame column instead of the time column.`,
    line: null,
  };
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
