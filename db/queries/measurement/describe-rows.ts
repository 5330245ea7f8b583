import { sql } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { MeasurementRow } from '../../inputs/measurement';
import { entryPeople } from '../entry/entry-people';
import type { Hit } from './find-page';

interface Described extends Record<string, unknown>, Omit<MeasurementRow, 'd'> {
  d: number | null;
  lo: number | null;
  hi: number | null;
}

/** What the ledger shows of the given matches, in their order. The caller has already filtered them by rights. */
export async function describeRows(db: Connection, hits: readonly Hit[]): Promise<MeasurementRow[]> {
  if (hits.length === 0) return [];
  const wanted = JSON.stringify(hits.map(({ entry, block }, place) => ({ entry, block, place })));
  const found = await db.execute<Described>(sql`
    select entry.id as "entryId", b.block_id as "blockId", b.position, b.caption, n.id as "notebookId",
      n.code as "notebookCode", n.title as "notebookTitle", entry.number, entry.title,
      entry.experiment_date::text as "experimentDate", entry.state, b.verdict, b.d, b.d_lo as lo, b.d_hi as hi,
      (r.outcome ->> 'tracks')::int as tracks, ${entryPeople} as people
    from jsonb_to_recordset(${wanted}::jsonb) as wanted(entry uuid, block text, place int)
      join block_result b on b.entry_id = wanted.entry and b.block_id = wanted.block
      join entry on entry.id = b.entry_id
      join notebook n on n.id = b.notebook_id
      left join result r on r.address = b.address
    where b.verdict is not null
    order by wanted.place`);
  return found.rows.map(({ d, lo, hi, ...row }) => ({ ...row, d: d === null ? null : { value: d, lo, hi } }));
}
