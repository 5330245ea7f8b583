import { and, eq, gt, isNull, ne, or } from 'drizzle-orm';
import { ENGINE_VERSION } from '../../analysis/analyse';
import type { Database } from '../../db/client';
import { blockResult, entry, entryText, result } from '../../db/schema/index';

/** Entries whose log is ahead of what was projected, announced or not. */
export async function findBehind(db: Database): Promise<string[]> {
  const rows = await db
    .select({ id: entry.id })
    .from(entry)
    .leftJoin(entryText, eq(entryText.entryId, entry.id))
    .where(
      and(
        gt(entry.headSeq, 0),
        or(isNull(entryText.seq), gt(entry.headSeq, entryText.seq), ne(entry.epoch, entryText.epoch)),
      ),
    );
  return rows.map((row) => row.id);
}

/** Entries with a block that waits for its result. */
export async function findWaiting(db: Database): Promise<string[]> {
  const rows = await db
    .selectDistinct({ id: blockResult.entryId })
    .from(blockResult)
    .where(eq(blockResult.status, 'waiting'));
  return rows.map((row) => row.id);
}

/**
 * Drafts whose questions are to be asked anew, once, when a projector starts: those that show a result of another engine,
 * and those that were given up for what had happened on the server. Signed entries keep what they were signed with.
 */
export async function findToAskAnew(db: Database): Promise<string[]> {
  const rows = await db
    .selectDistinct({ id: blockResult.entryId })
    .from(blockResult)
    .innerJoin(entry, eq(entry.id, blockResult.entryId))
    .leftJoin(result, eq(result.address, blockResult.address))
    .where(
      and(
        eq(entry.state, 'draft'),
        or(
          ne(result.engine, ENGINE_VERSION),
          and(eq(blockResult.status, 'failed'), isNull(blockResult.address)),
        ),
      ),
    );
  return rows.map((row) => row.id);
}
