import { and, sql, type SQL } from 'drizzle-orm';
import { VERDICTS, type MeasurementFilters } from '../../inputs/measurement';

/**
 * The filters as SQL over `block_result b` joined with its `entry e`. An interval with an open end (null) reaches
 * without limit on that side; a result without D has no interval and meets no range. Bounds belong to the range.
 */
export function matches(filters: MeasurementFilters): SQL {
  return all(
    isMeasurement,
    rangeOfD(filters),
    filters.dateFrom === null ? undefined : sql`e.experiment_date >= ${filters.dateFrom}::date`,
    filters.dateTo === null ? undefined : sql`e.experiment_date <= ${filters.dateTo}::date`,
  );
}

/** Only what the projector has computed for a committed block is a measurement. */
const isMeasurement = sql`b.status = 'done' and b.verdict is not null`;

export const asksForRange = ({ dFrom, dTo }: MeasurementFilters): boolean => dFrom !== null || dTo !== null;

function rangeOfD({ dFrom, dTo, range }: MeasurementFilters): SQL | undefined {
  if (dFrom === null && dTo === null) return undefined;
  const [low, high] = range === 'inside' ? [sql`b.d`, sql`b.d`] : [sql`b.d_lo`, sql`b.d_hi`];
  const open = (end: SQL) => (range === 'inside' ? sql`false` : sql`${end} is null`);
  return all(
    sql`b.d is not null`,
    dFrom === null ? undefined : sql`(${high} >= ${dFrom}::float8 or ${open(high)})`,
    dTo === null ? undefined : sql`(${low} <= ${dTo}::float8 or ${open(low)})`,
  );
}

/**
 * The verdicts asked for, as an array; none named means every one. Arrays travel as one parameter of their own type: a
 * cast inside the statement would be done anew for every row. Their items have been checked, so no quoting is needed.
 */
export function verdictsAsked({ verdict }: MeasurementFilters): SQL {
  return sql`${`{${(verdict.length > 0 ? verdict : VERDICTS).join(',')}}`}::verdict[]`;
}

/** Narrows the readable notebooks to those asked for: naming one adds no right to it. */
export function notebooksAsked({ notebook }: MeasurementFilters): SQL {
  return notebook.length === 0 ? sql`true` : sql`nb.notebook_id = any (${`{${notebook.join(',')}}`}::uuid[])`;
}

export function all(...conditions: (SQL | undefined)[]): SQL {
  return and(...conditions) ?? sql`true`;
}
