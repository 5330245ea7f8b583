import { formatNumber } from '@/components/ui/format-quantity';

/** A log axis for D, square micrometres per second: from `lo` to `hi`, both above zero. */
export interface IntervalScale {
  readonly lo: number;
  readonly hi: number;
  readonly ticks: readonly { readonly value: number; readonly label: string }[];
}

/** Below this ratio of its ends an axis shows noise as if it were structure. */
const LEAST_RATIO = 5;
const TICKS_MAX = 5;
/** Signs of all labels together that can be read side by side, with two between neighbours. */
const LABEL_SIGNS_MAX = 22;
/** Room beside the outermost values, as a factor. */
const ROOM = 1.2;

/**
 * An axis that holds all the given values; those that are not above zero have no place on it. Null when none is left.
 */
export function intervalScale(values: readonly (number | null)[]): IntervalScale | null {
  const placed = values.filter(
    (value): value is number => value !== null && value > 0 && Number.isFinite(value),
  );
  if (placed.length === 0) return null;
  let lo = Math.max(Math.min(...placed) / ROOM, Number.MIN_VALUE);
  let hi = Math.min(Math.max(...placed) * ROOM, Number.MAX_VALUE);
  const lacking = Math.sqrt(LEAST_RATIO / (hi / lo));
  if (lacking > 1) {
    lo /= lacking;
    hi *= lacking;
  }
  return { lo, hi, ticks: ticksBetween(lo, hi).map((value) => ({ value, label: tickLabel(value) })) };
}

/** Place of a value on the axis, from 0 (left end) to 1; beyond the ends it is held at them. Zero and below: at the left. */
export function placeOn(scale: IntervalScale, value: number): number {
  if (!(value > 0)) return 0;
  const place = (Math.log(value) - Math.log(scale.lo)) / (Math.log(scale.hi) - Math.log(scale.lo));
  return Math.min(1, Math.max(0, place));
}

/** 1, 2 and 5 within each decade when there is room, otherwise powers of ten, as many as can be read side by side. */
function ticksBetween(lo: number, hi: number): number[] {
  const first = Math.floor(Math.log10(lo));
  const last = Math.ceil(Math.log10(hi));
  const within = (mantissas: readonly number[], everyDecades: number) => {
    const found: number[] = [];
    for (let exponent = first; exponent <= last; exponent += 1) {
      if (exponent % everyDecades !== 0) continue;
      // Read from its digits: 2 × 10 ** −5 is not the number nearest to 0.00002.
      for (const mantissa of mantissas) found.push(Number(`${mantissa}e${exponent}`));
    }
    return found.filter((value) => value >= lo && value <= hi);
  };
  const candidates = [within([1, 2, 5], 1), within([1, 3], 1), within([1], 1)];
  for (let every = 2; every <= last - first; every += 1) candidates.push(within([1], every));
  return candidates.find((ticks) => ticks.length > 0 && fits(ticks)) ?? [];
}

function fits(ticks: readonly number[]): boolean {
  const signs = ticks.reduce((sum, value) => sum + tickLabel(value).length + 2, -2);
  return ticks.length <= TICKS_MAX && signs <= LABEL_SIGNS_MAX;
}

/** "0.05", "200"; powers of ten beyond four digits as "10⁻⁵". */
function tickLabel(value: number): string {
  const label = formatNumber(value, 1);
  const scaled = /^1\u2009×\u2009(10.+)$/u.exec(label);
  return scaled?.[1] ?? label;
}
