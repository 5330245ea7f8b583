import { isDeepStrictEqual } from 'node:util';
import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Database, Transaction } from '../../client';
import { blockResult, entry, entryText } from '../../schema/index';
import { describeBlocks, type ProjectedBlock, type Trouble, type WantedResult } from './describe-blocks';

/** What was read of an entry's committed updates up to `seq`. */
export interface Projection {
  readonly entryId: string;
  readonly epoch: number;
  readonly seq: number;
  readonly plain: string;
  readonly blocks: readonly ProjectedBlock[];
  readonly engine: string;
}

export interface Written {
  /** Results that the blocks name and that are still to be computed. */
  readonly wanted: readonly WantedResult[];
  /** Whether anything about the blocks is different from before. */
  readonly changed: boolean;
}

/**
 * Writes what was read of an entry: its words, and its blocks with the results they name; blocks that are gone go. Older
 * news than what is there already is ignored, and rows that would stay the same are left alone.
 * @param troubleOf - why an address cannot be computed just now, for the block to say.   @returns null when the news was old.
 */
export async function writeProjection(
  db: Database,
  projection: Projection,
  troubleOf: (address: string) => Trouble | null = () => null,
): Promise<Written | null> {
  const { entryId } = projection;
  return db.transaction(async (tx) => {
    // Two writers of one entry (a projector that is being replaced) take turns, so that the guard below holds.
    await tx.execute(sql`SELECT pg_advisory_xact_lock(hashtextextended(${`projection of ${entryId}`}, 0))`);
    const [head] = await tx
      .select({ notebookId: entry.notebookId, epoch: entry.epoch, before: entryText })
      .from(entry)
      .leftJoin(entryText, eq(entryText.entryId, entry.id))
      .where(eq(entry.id, entryId));
    if (!head || head.epoch !== projection.epoch) return null;
    const { before } = head;
    if (before && before.epoch === projection.epoch && before.seq > projection.seq) return null;
    const { epoch, seq, plain } = projection;
    const text = { epoch, seq, plain, at: sql`motebook_now()` };
    await tx
      .insert(entryText)
      .values({ entryId, ...text })
      .onConflictDoUpdate({ target: entryText.entryId, set: text });
    const { outcomes, wanted } = await describeBlocks(
      tx,
      entryId,
      projection.blocks,
      projection.engine,
      troubleOf,
    );
    const rows = projection.blocks.map((block, at) => ({
      entryId,
      blockId: block.blockId,
      notebookId: head.notebookId,
      position: at + 1,
      caption: block.caption,
      readingIds: [...block.readingIds],
      settings: block.settings,
      ...outcomes[at]!,
    }));
    return { wanted, changed: await replaceRows(tx, entryId, rows) };
  });
}

/** @returns whether any row was written or removed. */
async function replaceRows(
  tx: Transaction,
  entryId: string,
  rows: readonly Omit<typeof blockResult.$inferSelect, 'at'>[],
): Promise<boolean> {
  const before = await tx.select().from(blockResult).where(eq(blockResult.entryId, entryId));
  const changed = rows.filter((row) => {
    const known = before.find((one) => one.blockId === row.blockId);
    return !known || !isDeepStrictEqual({ ...row, at: known.at }, known);
  });
  const gone = before.filter((one) => rows.every((row) => row.blockId !== one.blockId));
  if (gone.length > 0) {
    const ids = gone.map((one) => one.blockId);
    await tx
      .delete(blockResult)
      .where(and(eq(blockResult.entryId, entryId), inArray(blockResult.blockId, ids)));
  }
  for (const row of changed) {
    const values = { ...row, at: sql`motebook_now()` };
    await tx
      .insert(blockResult)
      .values(values)
      .onConflictDoUpdate({ target: [blockResult.entryId, blockResult.blockId], set: values });
  }
  return changed.length + gone.length > 0;
}
