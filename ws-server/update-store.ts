import type pg from 'pg';
import type { Database } from '../db/client';
import type { Refusal } from '../editor/close-codes';
import type { UpdateGroup, UpdateStore } from './flusher';

interface AppendRow {
  refusal: Refusal | 'epoch' | 'unknown' | null;
  ordinal: number;
  seq: number;
}

/** Stores updates through the database's one write path, all groups of a batch in one transaction. */
export function databaseStore(db: Database): UpdateStore {
  return {
    async append(groups) {
      const client = await db.$client.connect();
      // A connection that breaks while it is checked out reports here; the query that was running fails on its own.
      const ignore = () => undefined;
      client.on('error', ignore);
      let broken = true;
      try {
        await client.query('BEGIN');
        const outcomes = [];
        for (const group of groups) outcomes.push(await appendGroup(client, group));
        await client.query('COMMIT');
        broken = false;
        return outcomes;
      } finally {
        client.off('error', ignore);
        client.release(broken);
      }
    },
  };
}

async function appendGroup(
  client: pg.PoolClient,
  group: UpdateGroup,
): Promise<{ seqs: number[] } | { refused: Refusal | 'epoch' }> {
  const first = group.updates[0]!;
  const { rows } = await client.query<AppendRow>(
    'SELECT * FROM append_updates($1, $2, $3, $4, $5, $6, $7, $8)',
    [
      first.entryId,
      first.lock,
      first.epoch,
      first.personId,
      first.loginId,
      group.batch,
      group.updates.map((update) => update.client),
      group.updates.map((update) => Buffer.from(update.payload)),
    ],
  );
  const refusal = rows[0]?.refusal;
  if (refusal) return { refused: refusal === 'unknown' ? 'forbidden' : refusal };
  if (rows.length !== group.updates.length)
    throw new Error('append_updates answered for another number of updates');
  return { seqs: rows.map((row) => row.seq) };
}
