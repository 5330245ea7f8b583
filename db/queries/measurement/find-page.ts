import { sql, type SQL } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { MeasurementFilters } from '../../inputs/measurement';
import type { Actor } from '../../policies/may';
import { readableNotebooks } from '../../policies/notebook-filter';
import { all, matches, notebooksAsked, verdictsAsked } from './conditions';
import type { Place } from './cursor';

/** Sort keys of a match; together they name the row and its place. */
export type Hit = Omit<Place, 'sort'>;

interface Slice {
  /** 'all', by date; 'with-d', by D; 'without-d', what comes last when sorted by D: by date, newest first. */
  readonly part: 'all' | 'with-d' | 'without-d';
  readonly after: Hit | null;
  readonly wanted: number;
}

type HitRow = Hit & Record<string, unknown>;

/** The next `wanted` matches after a place. */
export async function findPage(
  db: Connection,
  actor: Actor,
  query: MeasurementFilters,
  slice: Slice,
): Promise<Hit[]> {
  return (await db.execute<HitRow>(pageStatement(actor, query, slice))).rows;
}

/**
 * The statement behind `findPage`. The reader's notebooks come first; each gives its own first `wanted` matches from an
 * index (by D: each notebook and verdict), and these short lists are merged. A row whose notebook no longer agrees with
 * its entry's is not found: when rights are in doubt, the answer is no.
 */
export function pageStatement(actor: Actor, query: MeasurementFilters, slice: Slice): SQL {
  const byD = slice.part === 'with-d';
  const descending = byD ? query.sort === 'd-desc' : query.sort !== 'date-asc';
  const direction = descending ? sql`desc` : sql`asc`;
  const order = (keys: readonly SQL[]) =>
    sql.join(
      keys.map((key) => sql`${key} ${direction}`),
      sql`, `,
    );
  const parts = byD
    ? sql`cross join unnest(${verdictsAsked(query)}) as asked(verdict)`
    : sql`cross join (select ${verdictsAsked(query)} as verdicts) as asked`;
  return sql`
    select hit.d, hit.date::text as date, hit.number, hit.entry, hit.position, hit.block
    from ${readableNotebooks(actor)} nb ${parts} cross join lateral (
      select b.d, e.experiment_date as date, e.number, b.entry_id as entry, b.position, b.block_id as block
      from block_result b join entry e on e.id = b.entry_id and e.notebook_id = b.notebook_id
      where b.notebook_id = nb.notebook_id
        and ${byD ? sql`b.verdict = asked.verdict` : sql`b.verdict = any (asked.verdicts)`}
        and ${all(matches(query), partOf(slice), past(slice, byD, descending))}
      order by ${order(byD ? INNER_BY_D : INNER_BY_DATE)}
      limit ${slice.wanted}) hit
    where ${notebooksAsked(query)}
    order by ${order(byD ? OUTER_BY_D : OUTER_BY_DATE)}
    limit ${slice.wanted}`;
}

const INNER_BY_D = [sql`b.d`, sql`b.entry_id`, sql`b.block_id`];
const OUTER_BY_D = [sql`hit.d`, sql`hit.entry`, sql`hit.block`];
const INNER_BY_DATE = [
  sql`e.experiment_date`,
  sql`e.number`,
  sql`b.entry_id`,
  sql`b.position`,
  sql`b.block_id`,
];
const OUTER_BY_DATE = [sql`hit.date`, sql`hit.number`, sql`hit.entry`, sql`hit.position`, sql`hit.block`];

function partOf({ part }: Slice): SQL | undefined {
  if (part === 'with-d') return sql`b.d is not null`;
  return part === 'without-d' ? sql`b.d is null` : undefined;
}

function past({ after }: Slice, byD: boolean, descending: boolean): SQL | undefined {
  if (after === null) return undefined;
  const beyond = descending ? sql`<` : sql`>`;
  const values = byD
    ? sql`(${after.d}::float8, ${after.entry}::uuid, ${after.block}::text)`
    : sql`(${after.date}::date, ${after.number}::int, ${after.entry}::uuid, ${after.position}::int, ${after.block}::text)`;
  return sql`(${sql.join(byD ? INNER_BY_D : INNER_BY_DATE, sql`, `)}) ${beyond} ${values}`;
}
