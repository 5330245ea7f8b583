import { sql } from 'drizzle-orm';
import type { Verdict } from '../../../analysis/types';
import { entry } from '../../schema/index';

/** A result as a ledger shows it. D in square micrometres per second; an open end is null. */
export interface LedgerResult {
  readonly blockId: string;
  readonly verdict: Verdict;
  readonly d: number | null;
  readonly lo: number | null;
  readonly hi: number | null;
}

export const LEDGER_RESULTS_MAX = 3;

/** The first results of an entry in the order of its blocks, as SQL over the table `entry`. */
export const entryResults = sql<LedgerResult[]>`coalesce((
  select json_agg(json_build_object('blockId', b.block_id, 'verdict', b.verdict, 'd', b.d, 'lo', b.d_lo, 'hi', b.d_hi)
    order by b.position)
  from (select * from block_result r where r.entry_id = ${entry.id} and r.status = 'done' and r.verdict is not null
    order by r.position limit ${sql.raw(String(LEDGER_RESULTS_MAX))}) b), '[]'::json)`;

/** How many results the entry has in all. */
export const entryResultCount = sql<number>`(select count(*)::int from block_result r
  where r.entry_id = ${entry.id} and r.status = 'done' and r.verdict is not null)`;
