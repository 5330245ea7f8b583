import { sql, type SQL } from 'drizzle-orm';
import type { Connection } from '../../client';
import {
  COUNT_LIMIT,
  type BoundedCount,
  type MeasurementFilters,
  type MeasurementSummary,
  type Restriction,
} from '../../inputs/measurement';
import type { Actor } from '../../policies/may';
import { readableNotebooks } from '../../policies/notebook-filter';
import { all, asksForRange, matches, notebooksAsked, verdictsAsked } from './conditions';

interface Counted {
  readonly bounded: BoundedCount;
  readonly extent: MeasurementSummary['extent'];
}

/** What the first page says about all matches; every count is bounded and made under the same access rule as the rows. */
export async function summarise(
  db: Connection,
  actor: Actor,
  filters: MeasurementFilters,
): Promise<MeasurementSummary> {
  const { bounded: total, extent } = await count(db, actor, filters);
  const withoutD = asksForRange(filters)
    ? (await count(db, actor, { ...filters, dFrom: null, dTo: null }, sql`b.d is null`)).bounded
    : null;
  const without: MeasurementSummary['without'] = [];
  if (total.count === 0) {
    for (const [what, widened] of widenings(filters)) {
      without.push({ what, ...(await count(db, actor, widened)).bounded });
    }
  }
  return { total, extent, withoutD, without };
}

/** The same question with one restriction dropped, for each restriction that was made. */
function* widenings(filters: MeasurementFilters): Generator<[Restriction, MeasurementFilters]> {
  if (asksForRange(filters)) yield ['range', { ...filters, dFrom: null, dTo: null }];
  if (filters.verdict.length > 0) yield ['verdict', { ...filters, verdict: [] }];
  if (filters.notebook.length > 0) yield ['notebook', { ...filters, notebook: [] }];
  if (filters.dateFrom !== null || filters.dateTo !== null)
    yield ['date', { ...filters, dateFrom: null, dateTo: null }];
}

async function count(
  db: Connection,
  actor: Actor,
  filters: MeasurementFilters,
  also?: SQL,
): Promise<Counted> {
  const found = await db.execute<{ count: number; lo: number | null; hi: number | null }>(
    countStatement(actor, filters, also),
  );
  const { count: counted = 0, lo = null, hi = null } = found.rows[0] ?? {};
  return {
    bounded: { count: Math.min(counted, COUNT_LIMIT), more: counted > COUNT_LIMIT },
    extent: lo === null || hi === null ? null : { lo, hi },
  };
}

/** Counts up to one more than COUNT_LIMIT, and finds the ends above zero of what it counted. */
export function countStatement(actor: Actor, filters: MeasurementFilters, also?: SQL): SQL {
  return sql`
    select count(*) as count, min(found.lo) as lo, max(found.hi) as hi
    from (
      select least(nullif(greatest(b.d, 0), 0), nullif(greatest(b.d_lo, 0), 0)) as lo,
        nullif(greatest(b.d, b.d_hi, 0), 0) as hi
      from ${readableNotebooks(actor)} nb
        join block_result b on b.notebook_id = nb.notebook_id and b.verdict = any (${verdictsAsked(filters)})
        join entry e on e.id = b.entry_id and e.notebook_id = b.notebook_id
      where ${all(notebooksAsked(filters), matches(filters), also)}
      limit ${COUNT_LIMIT + 1}) found`;
}
