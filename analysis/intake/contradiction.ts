import { frameTiming } from '../input/frame-interval';
import type { Trajectories } from '../types';
import { intakeFailure } from './failure';
import { timesByTrack } from './summarise';
import type { IntakeFailure } from './types';

/**
 * A stated interval may be rounded, but not by more than this part of itself. Ten frames on, a difference of one in a hundred
 * puts a time a tenth of a frame beside its place, which is where frames stop being regular (analysis/input).
 */
const ROUNDED = 0.01;

/** A stated frame interval that the times of the file do not bear out; null when it does, or when there is nothing to compare. */
export function contradictionOf(
  data: Omit<Trajectories, 'hash'>,
  stated: string | null,
): IntakeFailure | null {
  if (data.time === null || stated === null) return null;
  const measured = frameTiming(timesByTrack(data), null)?.interval;
  if (measured === undefined || Math.abs(measured / Number(stated) - 1) <= ROUNDED) return null;
  return intakeFailure(
    'frame-interval-contradicts',
    `The times in the file are ${Number(measured.toPrecision(4))} s apart, but the stated frame interval is ${stated} s. Leave the frame interval out, or check the unit of the time column.`,
  );
}
