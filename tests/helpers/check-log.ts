import { sql } from 'drizzle-orm';
import { expect } from 'vitest';
import type { Database } from '../../db/client';
import { CHAIN_START, nextChain } from '../../db/integrity/chain';
import { loadDocument } from '../../db/queries/document/load-document';
import { wordsOf } from './typist';

interface Row extends Record<string, unknown> {
  seq: number;
  epoch: number;
  person_id: string;
  micros: string;
  payload: Buffer;
  chain: Buffer;
}

/**
 * Checks an entry's log as an outsider would: numbers 1, 2, 3 … without a gap, every link of the chain recomputed from the
 * rows alone, the entry's head equal to the last of them.
 * @returns the words of the document that the log makes.
 */
export async function checkLog(db: Database, entryId: string): Promise<string> {
  const { rows } = await db.execute<Row>(sql`
    SELECT seq, epoch, person_id, payload, chain, (extract(epoch FROM at) * 1000000)::bigint::text AS micros
    FROM entry_update WHERE entry_id = ${entryId} ORDER BY seq`);
  expect(rows.map((row) => row.seq)).toEqual(rows.map((_row, i) => i + 1));
  let chain: Buffer = CHAIN_START;
  for (const row of rows) {
    chain = nextChain(chain, {
      entry: entryId,
      seq: BigInt(row.seq),
      epoch: BigInt(row.epoch),
      person: row.person_id,
      micros: BigInt(row.micros),
      payload: row.payload,
    });
    expect([row.seq, row.chain.toString('hex')]).toEqual([row.seq, chain.toString('hex')]);
  }
  const { rows: heads } = await db.execute<{ head_seq: number; head_chain: Buffer }>(
    sql`SELECT head_seq, head_chain FROM entry WHERE id = ${entryId}`,
  );
  expect(heads[0]?.head_seq).toBe(rows.length);
  expect(heads[0]?.head_chain.toString('hex')).toBe(chain.toString('hex'));
  const loaded = await loadDocument(db, entryId);
  if (!loaded) throw new Error('the entry is not there');
  return wordsOf(loaded.doc);
}
