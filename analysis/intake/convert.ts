import type { Exposure } from '../types';
import type { LengthUnit, ReadingSpec, TimeUnit } from './types';
import { MICROMETRES, SECONDS } from './units';

/** Division by a whole number rounds once; multiplication by 0.001 would round twice. */
function scale(factor: number): (value: number) => number {
  if (factor === 1) return (value) => value;
  const divisor = Math.round(1 / factor);
  return factor < 1 ? (value) => value / divisor : (value) => value * factor;
}

/** Turns a number in a unit of length into micrometres; µm stay as they are, to the last bit. */
export function toMicrometres(unit: LengthUnit, pixelSize: number): (value: number) => number {
  return unit === 'px' ? (value) => value * pixelSize : scale(MICROMETRES[unit]);
}

/** Turns a number in a unit of time into seconds; seconds stay as they are, to the last bit. */
export function toSeconds(unit: TimeUnit): (value: number) => number {
  return scale(SECONDS[unit]);
}

/** The exposure of a reading as numbers. */
export function exposureOf({ exposure }: ReadingSpec): Exposure | null {
  if (exposure === null) return null;
  return 'seconds' in exposure
    ? { seconds: Number(exposure.seconds) }
    : { fraction: Number(exposure.fraction) };
}
