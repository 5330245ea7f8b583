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
  msecs: 'ms',
  millisecond: 'ms',
  milliseconds: 'ms',
  us: 'us',
  usec: 'us',
  microsecond: 'us',
  microseconds: 'us',
  min: 'min',
  mins: 'min',
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
  millimeters: 'mm',
  millimetre: 'mm',
  millimetres: 'mm',
  m: 'm',
  meter: 'm',
  meters: 'm',
  metre: 'm',
  metres: 'm',
  px: 'px',
  pix: 'px',
  pxl: 'px',
  pixel: 'px',
  pixels: 'px',
};

/** Units that exist but are not converted here: a file in them must not pass as micrometres or seconds. */
const OTHER_UNITS: ReadonlySet<string> = new Set(
  [
    'pm',
    'å',
    'a',
    'ang',
    'angstrom',
    'angstroms',
    'ångström',
    'cm',
    'dm',
    'km',
    'in',
    'inch',
    'inches',
    'ft',
    'mil',
  ].concat(['fs', 'ps', 'ns', 'nanosecond', 'nanoseconds', 'd', 'day', 'days', 'week', 'weeks']),
);
const TEMPERATURES: ReadonlySet<string> = new Set(
  ['c', 'k', 'f', '°c', '°f', '℃', 'degc', 'deg c', 'degree c', 'degrees c'].concat(['celsius', 'kelvin']),
);
const FRAME_WORDS: ReadonlySet<string> = new Set(['frame', 'frames', 'image', 'images', 'slice', 'slices']);

/** A unit as people write it: µ (U+00B5) and μ (U+03BC) both mean micro; a full stop after "sec." means nothing. */
function plain(text: string): string {
  const lower = text.trim().toLowerCase().replaceAll('µ', 'u').replaceAll('μ', 'u');
  return lower.endsWith('.') ? lower.slice(0, -1) : lower;
}
/** Own words only: "constructor" is no unit. */
const lookUp = <T>(words: Readonly<Record<string, T>>, text: string): T | null =>
  Object.hasOwn(words, plain(text)) ? words[plain(text)]! : null;

export const timeUnit = (text: string): TimeUnit | null => lookUp(TIME_WORDS, text);
export const lengthUnit = (text: string): LengthUnit | null => lookUp(LENGTH_WORDS, text);
export const isUnit = (text: string): boolean => timeUnit(text) !== null || lengthUnit(text) !== null;
/** A unit of length or time that cannot be converted here, such as inches or days. */
export const isOtherUnit = (text: string): boolean => OTHER_UNITS.has(plain(text));
/** "T (°C)" is a temperature and no time. */
export const isTemperature = (text: string): boolean => TEMPERATURES.has(plain(text));
/** "time (frames)" counts frames. */
export const countsFrames = (text: string): boolean => FRAME_WORDS.has(plain(text));

const BRACKETS: Readonly<Record<string, string>> = { ')': '(', ']': '[', '}': '{' };

/** Text without one pair of brackets around it: "(s)" → "s". */
export function withoutBrackets(text: string): string {
  const open = BRACKETS[text.at(-1) ?? ''];
  return open !== undefined && text.startsWith(open) ? text.slice(1, -1).trim() : text;
}

/**
 * A column's name and unit: "x (µm)", "time [s]", "x/µm", "time, s", "x_um", "t_s", "x µm".
 * @returns unit as written, or null. Only brackets may hold a unit that is not known.
 */
export function splitNameAndUnit(header: string): { name: string; unit: string | null } {
  const text = header.trim();
  const bracket = BRACKETS[text.at(-1) ?? ''];
  const open = bracket === undefined ? -1 : text.lastIndexOf(bracket);
  if (open > 0) return { name: text.slice(0, open).trim(), unit: text.slice(open + 1, -1).trim() || null };
  for (const mark of ['/', ',', ';', '_', ' ']) {
    const at = text.lastIndexOf(mark);
    const unit = text.slice(at + 1).trim();
    if (at > 0 && (isUnit(unit) || (mark === '/' && isOtherUnit(unit)))) {
      const name = text.slice(0, at).trim();
      return { name: name.endsWith(' in') ? name.slice(0, -3).trim() : name, unit };
    }
  }
  return { name: text, unit: null };
}
