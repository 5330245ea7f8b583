/**
 * Numbers as a paper would print them: a proper minus sign, as many digits as the uncertainty allows, thin spaces, powers
 * of ten in superscript. Pure functions; the components only set the symbols in italics.
 */

const MINUS = '\u2212';
/** Between number and unit. Whoever shows it keeps the line from breaking there (class "quantity"). */
export const THIN_SPACE = '\u2009';
const superscripts: Readonly<Record<string, string>> = {
  '-': '⁻',
  '0': '⁰',
  '1': '¹',
  '2': '²',
  '3': '³',
  '4': '⁴',
  '5': '⁵',
  '6': '⁶',
  '7': '⁷',
  '8': '⁸',
  '9': '⁹',
};

/** Decimals that numbers can have before a power of ten reads better: 0.00012 still does, 0.000012 does not. */
const LOWEST_EXPONENT = -4;
const HIGHEST_EXPONENT = 5;

/** A value with its interval, ready to be set: `scale` is "" or a power of ten that belongs to all three. */
export interface FormattedEstimate {
  readonly value: string;
  /** "0.418–0.445", or "above 0.1" / "below 2.0" when one end is open, or null without any end. */
  readonly interval: string | null;
  readonly scale: string;
}

/** "×10⁻⁵" with thin spaces. @param exponent - a whole number. */
export function powerOfTen(exponent: number): string {
  const digits = [...String(exponent)].map((sign) => superscripts[sign]).join('');
  return `${THIN_SPACE}×${THIN_SPACE}10${digits}`;
}

/** With a proper minus; "−0.00" is printed as "0.00". */
export function fixed(value: number, decimals: number): string {
  const text = value.toFixed(Math.max(0, decimals));
  if (!text.startsWith('-')) return text;
  return Number(text) === 0 ? text.slice(1) : MINUS + text.slice(1);
}

/**
 * A number with so many significant digits, e.g. 0.43, 1260, 4.3 × 10⁻⁵.
 * @throws RangeError - not finite, or digits outside 1 to 15.
 */
export function formatNumber(value: number, digits: number): string {
  checkFinite(value);
  if (!Number.isInteger(digits) || digits < 1 || digits > 15)
    throw new RangeError(`${digits} significant digits`);
  if (value === 0) return '0';
  const exponent = exponentOf(value, digits);
  if (exponent < LOWEST_EXPONENT || exponent > HIGHEST_EXPONENT) {
    return fixed(value / 10 ** exponent, digits - 1) + powerOfTen(exponent);
  }
  const rounded = Number(value.toPrecision(digits));
  return fixed(rounded, digits - 1 - exponent);
}

/**
 * A value with its interval, rounded so that the uncertainty keeps two significant digits and no more.
 * The uncertainty is half the interval; with one open end, the distance to the other.
 * @param value - finite. @param lo, hi - ends of the interval in the same unit, null when open or unknown.
 * @throws RangeError - a number is not finite, or lo > hi.
 */
export function formatEstimate(value: number, lo: number | null, hi: number | null): FormattedEstimate {
  for (const number of [value, lo, hi]) if (number !== null) checkFinite(number);
  if (lo !== null && hi !== null && lo > hi) throw new RangeError(`interval from ${lo} to ${hi}`);
  const uncertainty = lo !== null && hi !== null ? (hi - lo) / 2 : Math.abs(value - (lo ?? hi ?? value));
  if (uncertainty === 0) return { value: formatNumber(value, 3), interval: null, scale: '' };

  const largest = Math.max(Math.abs(value), Math.abs(lo ?? 0), Math.abs(hi ?? 0));
  const valueExponent = exponentOf(largest, 3);
  const scaled = valueExponent < LOWEST_EXPONENT || valueExponent > HIGHEST_EXPONENT;
  const shift = scaled ? valueExponent : 0;
  const decimals = 1 - (exponentOf(uncertainty, 2) - shift);
  const show = (number: number) => {
    const shifted = number / 10 ** shift;
    return decimals > 0 ? fixed(shifted, decimals) : fixed(roundTo(shifted, -decimals), 0);
  };
  return {
    value: show(value),
    interval: formatRange(lo, hi, show),
    scale: scaled ? powerOfTen(shift) : '',
  };
}

/** "D = 0.431 µm²/s (0.418–0.445)" as plain text, for labels that are read aloud and for charts. */
export function quantityText(quantity: {
  symbol?: string;
  value: number;
  lo?: number | null;
  hi?: number | null;
  unit: string;
}): string {
  const { value, interval, scale } = formatEstimate(quantity.value, quantity.lo ?? null, quantity.hi ?? null);
  const unit = scale + (quantity.unit === '' ? '' : THIN_SPACE + quantity.unit);
  const start = quantity.symbol ? `${quantity.symbol} = ` : '';
  return `${start}${value}${unit}${interval === null ? '' : ` (${interval}${scale})`}`;
}

function formatRange(lo: number | null, hi: number | null, show: (number: number) => string): string | null {
  if (lo !== null && hi !== null) {
    // A dash before a minus sign would be misread.
    return lo < 0 || hi < 0 ? `${show(lo)} to ${show(hi)}` : `${show(lo)}–${show(hi)}`;
  }
  if (lo !== null) return `above ${show(lo)}`;
  return hi === null ? null : `below ${show(hi)}`;
}

/** Power of ten of the leading digit once the number is rounded to so many digits: 0.0996 to two digits is 0.10, so −1. */
function exponentOf(value: number, digits: number): number {
  return Number(value.toExponential(digits - 1).split('e')[1]);
}

/** To the nearest 1, 10, 100 … (`zeros` zeros). */
function roundTo(value: number, zeros: number): number {
  return Math.round(value / 10 ** zeros) * 10 ** zeros;
}

function checkFinite(value: number): void {
  if (!Number.isFinite(value)) throw new RangeError(`cannot print ${value}`);
}
