import { z } from 'zod';

/**
 * What may be asked of Measurements and what is answered: the query string of `GET /api/measurements` (checked there),
 * the fields of the page (the same checks, while typing) and the JSON that comes back (checked by the page again).
 */

export const VERDICTS = ['free', 'directed', 'confined', 'anomalous', 'undecided'] as const;
export const RANGE_MODES = ['overlaps', 'inside'] as const;
export const MEASUREMENT_SORTS = ['date-desc', 'date-asc', 'd-asc', 'd-desc'] as const;
/** Matches beyond this are not counted one by one: "more than 1,000". */
export const COUNT_LIMIT = 1000;
export const PAGE_ROWS = 50;
const PAGE_ROWS_MAX = 100;
const NOTEBOOKS_MAX = 100;

export type RangeMode = (typeof RANGE_MODES)[number];
export type MeasurementSort = (typeof MEASUREMENT_SORTS)[number];

/** A bound of D as people type it: a plain decimal number, square micrometres per second, zero or more. */
export const boundOfD = z
  .string()
  .trim()
  .max(32, 'Enter a shorter number, such as 0.43.')
  .refine((text) => !text.includes(','), {
    error: 'Write the decimal with a point, as in 0.43.',
    abort: true,
  })
  .refine((text) => !/^[-−]/.test(text), { error: 'D is never negative. Enter zero or more.', abort: true })
  .refine((text) => /^(\d{1,25}\.?\d{0,25}|\.\d{1,25})(e[+-]?\d{1,3})?$/i.test(text), {
    error: 'Enter a number in µm²/s, such as 0.43 or 2e-3.',
    abort: true,
  })
  .transform(Number)
  .refine(Number.isFinite, 'This number is too large.');

/** A calendar day, as date fields give it. PostgreSQL knows no year 0, and no experiment was before 1900. */
export const dayOfExperiment = z
  .string()
  .trim()
  .pipe(z.iso.date('Enter a date that exists, as year-month-day: 2026-03-02.'))
  .refine((day) => day >= '1900-01-01', 'Enter a date from 1900 on.');

const listOf = <Item extends z.ZodType<string, string>>(item: Item, most: number) =>
  z
    .string()
    .transform((text) => [...new Set(text.split(','))])
    .pipe(z.array(item).max(most, `At most ${most} can be named.`));

const fields = {
  dFrom: boundOfD.nullable().default(null),
  dTo: boundOfD.nullable().default(null),
  range: z.enum(RANGE_MODES, `Must be one of ${RANGE_MODES.join(', ')}.`).default('overlaps'),
  verdict: listOf(z.enum(VERDICTS, `Each must be one of ${VERDICTS.join(', ')}.`), VERDICTS.length).default(
    [],
  ),
  notebook: listOf(z.uuid('Each must be the id of a notebook.'), NOTEBOOKS_MAX).default([]),
  dateFrom: dayOfExperiment.nullable().default(null),
  dateTo: dayOfExperiment.nullable().default(null),
  sort: z.enum(MEASUREMENT_SORTS, `Must be one of ${MEASUREMENT_SORTS.join(', ')}.`).default('date-desc'),
};

export const RANGE_REVERSED = 'The upper bound is below the lower one.';
export const DATES_REVERSED = 'This day is before the first one.';

/** Query string of `GET /api/measurements`. Lists are comma-separated; anything it does not name is refused. */
export const measurementQuery = z
  .strictObject({
    ...fields,
    /** Where the previous page ended, as that page said. */
    after: z.string().max(600, 'This is not a place in the list.').nullable().default(null),
    limit: z.coerce
      .number('Must be a whole number.')
      .int('Must be a whole number.')
      .min(1, 'Must be at least 1.')
      .max(PAGE_ROWS_MAX, `Must be at most ${PAGE_ROWS_MAX}.`)
      .default(PAGE_ROWS),
  })
  .superRefine(({ dFrom, dTo, dateFrom, dateTo }, check) => {
    if (dFrom !== null && dTo !== null && dTo < dFrom) {
      check.addIssue({ code: 'custom', path: ['dTo'], message: RANGE_REVERSED });
    }
    if (dateFrom !== null && dateTo !== null && dateTo < dateFrom) {
      check.addIssue({ code: 'custom', path: ['dateTo'], message: DATES_REVERSED });
    }
  });

export type MeasurementQuery = z.output<typeof measurementQuery>;
/** The question itself, without the place in the list. Null and empty lists ask for no restriction. */
export type MeasurementFilters = Omit<MeasurementQuery, 'after' | 'limit'>;
export const filterFields = fields;

export const NO_FILTERS: MeasurementFilters = {
  dFrom: null,
  dTo: null,
  range: 'overlaps',
  verdict: [],
  notebook: [],
  dateFrom: null,
  dateTo: null,
  sort: 'date-desc',
};

/** A count that stops at COUNT_LIMIT; `more`: there are more than it says. */
const boundedCount = z.object({ count: z.int().min(0).max(COUNT_LIMIT), more: z.boolean() });
export type BoundedCount = z.output<typeof boundedCount>;

/** One diffusion block with its current result. */
const measurementRow = z.object({
  entryId: z.uuid(),
  blockId: z.string(),
  /** Place among the entry's blocks, from 1. */
  position: z.int().min(1),
  caption: z.string(),
  notebookId: z.uuid(),
  notebookCode: z.string(),
  notebookTitle: z.string(),
  /** Running number of the entry in its notebook. */
  number: z.int(),
  title: z.string(),
  experimentDate: z.iso.date(),
  state: z.enum(['draft', 'closing', 'signed', 'countersigned', 'void']),
  /** Printed names: who started the entry first, then the others whose edits reached it. */
  people: z.array(z.string()).min(1),
  verdict: z.enum(VERDICTS),
  /** Square micrometres per second; null when the motion has no single D or none was resolved. An open end is null. */
  d: z.object({ value: z.number(), lo: z.number().nullable(), hi: z.number().nullable() }).nullable(),
  /** Tracks that entered the result; null when the result does not say. */
  tracks: z.int().min(0).nullable(),
});
export type MeasurementRow = z.output<typeof measurementRow>;

/** What the first page says about all matches. Every number here counts only what the asker may read. */
const measurementSummary = z.object({
  total: boundedCount,
  /** Smallest lower and largest upper end above zero of the counted matches' intervals; null without any. */
  extent: z.object({ lo: z.number().positive(), hi: z.number().positive() }).nullable(),
  /** Results that match everything but have no D to hold against a range; null when no range is asked for. */
  withoutD: boundedCount.nullable(),
  /** Only when nothing matches: how many would, with one restriction dropped. */
  without: z.array(
    z.object({ what: z.enum(['range', 'verdict', 'notebook', 'date']), ...boundedCount.shape }),
  ),
});
export type MeasurementSummary = z.output<typeof measurementSummary>;
export type Restriction = MeasurementSummary['without'][number]['what'];

/** Answer of `GET /api/measurements`. */
export const measurementPage = z.object({
  rows: z.array(measurementRow).max(PAGE_ROWS_MAX),
  /** Give as `after` for the next page; null: this is the last one. */
  next: z.string().nullable(),
  /** On the first page only. */
  summary: measurementSummary.nullable(),
});
export type MeasurementPage = z.output<typeof measurementPage>;
