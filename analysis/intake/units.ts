import type { LengthUnit, TimeUnit } from './types';

/** Seconds in a unit of time. */
export const SECONDS: Readonly<Record<TimeUnit, number>> = { s: 1, ms: 1e-3, us: 1e-6, min: 60, h: 3600 };
/** Micrometres in a unit of length; pixels depend on the camera. */
export const MICROMETRES: Readonly<Record<Exclude<LengthUnit, 'px'>, number>> = {
  um: 1,
  nm: 1e-3,
  mm: 1e3,
  m: 1e6,
};

const TIME_WORDS: Readonly<Record<string, TimeUnit>> = {
  s: 's',
  sec: 's',
  secs: 's',
  second: 's',
  seconds: 's',
  ms: 'ms',
  msec: 'ms',
  millisecond: 'ms',
  milliseconds: 'ms',
  us: 'us',
  microsecond: 'us',
  microseconds: 'us',
  min: 'min',
  minute: 'min',
  minutes: 'min',
  h: 'h',
  hr: 'h',
  hour: 'h',
  hours: 'h',
};
const LENGTH_WORDS: Readonly<Record<string, LengthUnit>> = {
  um: 'um',
  micron: 'um',
  microns: 'um',
  micrometer: 'um',
  micrometers: 'um',
  micrometre: 'um',
  micrometres: 'um',
  nm: 'nm',
  nanometer: 'nm',
  nanometers: 'nm',
  nanometre: 'nm',
  nanometres: 'nm',
  mm: 'mm',
  millimeter: 'mm',
  millimetre: 'mm',
  millimetres: 'mm',
  m: 'm',
  meter: 'm',
  meters: 'm',
  metre: 'm',
  metres: 'm',
  px: 'px',
  pix: 'px',
  pixel: 'px',
  pixels: 'px',
};

/** A unit as people write it: µ (U+00B5) and μ (U+03BC) both mean micro. */
const plain = (text: string) => text.trim().toLowerCase().replaceAll('µ', 'u').replaceAll('μ', 'u');

export const timeUnit = (text: string): TimeUnit | null => TIME_WORDS[plain(text)] ?? null;
export const lengthUnit = (text: string): LengthUnit | null => LENGTH_WORDS[plain(text)] ?? null;
export const isUnit = (text: string): boolean => timeUnit(text) !== null || lengthUnit(text) !== null;

/**
 * A column's name and unit: "x (µm)", "time [s]", "x/µm", "time, s", "x_um", "t_s", "x µm".
 * @returns unit as written, or null.
 */
export function splitNameAndUnit(header: string): { name: string; unit: string | null } {
  const text = header.trim();
  const last = text.at(-1);
  const open = last === ')' ? text.lastIndexOf('(') : last === ']' ? text.lastIndexOf('[') : -1;
  if (open > 0) return { name: text.slice(0, open).trim(), unit: text.slice(open + 1, -1).trim() || null };
  for (const mark of ['/', ',', '_', ' ']) {
    const at = text.lastIndexOf(mark);
    if (at > 0 && isUnit(text.slice(at + 1)))
      return { name: text.slice(0, at).trim(), unit: text.slice(at + 1).trim() };
  }
  return { name: text, unit: null };
}
