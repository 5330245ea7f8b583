import {
  DATES_REVERSED,
  filterFields,
  NO_FILTERS,
  RANGE_REVERSED,
  type MeasurementFilters,
} from '@/db/inputs/measurement';

/**
 * The question as it stands in the page's address: the whole of it, so that an address can be kept and passed on. What is
 * not asked for is left out, and the same question always gives the same address.
 */
export function writeFilters(filters: MeasurementFilters): URLSearchParams {
  const params = new URLSearchParams();
  for (const key of KEYS) {
    const value = filters[key];
    const isDefault = Array.isArray(value) ? value.length === 0 : value === NO_FILTERS[key];
    if (!isDefault) params.set(key, String(value));
  }
  return params;
}

/** A part of the address that is not usable, with what is wrong, so that the field can show both. */
export interface UrlFault {
  readonly text: string;
  readonly message: string;
}
export type FilterKey = keyof MeasurementFilters;
export type UrlFaults = Partial<Record<FilterKey, UrlFault>>;

const KEYS = Object.keys(filterFields) as FilterKey[];

/**
 * Reads the question back. Somebody may have written the address by hand: a part that cannot be read is named in `faults`
 * and asks for nothing; parts that mean nothing here are left alone.
 */
export function readFilters(params: URLSearchParams): { filters: MeasurementFilters; faults: UrlFaults } {
  const found: Record<string, unknown> = {};
  const faults: UrlFaults = {};
  for (const key of KEYS) {
    const [text, ...others] = params.getAll(key);
    if (text === undefined) continue;
    const parsed = filterFields[key].safeParse(text);
    if (parsed.success && others.length === 0) found[key] = parsed.data;
    else faults[key] = { text, message: parsed.error?.issues[0]?.message ?? 'This was given twice.' };
  }
  const filters = { ...NO_FILTERS, ...found } as MeasurementFilters;
  if (isReversed(filters.dFrom, filters.dTo)) {
    faults.dTo = { text: String(filters.dTo), message: RANGE_REVERSED };
    filters.dTo = null;
  }
  if (isReversed(filters.dateFrom, filters.dateTo)) {
    faults.dateTo = { text: String(filters.dateTo), message: DATES_REVERSED };
    filters.dateTo = null;
  }
  return { filters, faults };
}

/** Whether both ends are given and the second lies below the first. */
export function isReversed<T extends number | string>(from: T | null, to: T | null): boolean {
  return from !== null && to !== null && to < from;
}

/** How many restrictions are made; the order of the list is not one. */
export function countRestrictions(filters: MeasurementFilters): number {
  const { dFrom, dTo, dateFrom, dateTo, verdict, notebook } = filters;
  const made = [dFrom ?? dTo, dateFrom ?? dateTo, verdict[0] ?? null, notebook[0] ?? null];
  return made.filter((one) => one !== null).length;
}
