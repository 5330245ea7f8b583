import { asc, eq } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { BlockAnswer } from '../../inputs/block-answer';
import type { Actor } from '../../policies/may';
import { attachment, blockResult, entryText, reading, result } from '../../schema/index';
import { getEntryFor } from '../entry/get-entry-for';

/**
 * Diffusion blocks of an entry with their current results, as the projector wrote them, and the readings that its blocks
 * may name. A reading of another entry that somebody wrote into a block tells nothing here.
 * @throws AppError not-found - no such entry, or the actor may not know that it exists.
 */
export async function listBlocks(db: Connection, actor: Actor, entryId: string): Promise<BlockAnswer> {
  await getEntryFor(db, actor, entryId, 'entry.read');
  const [text] = await db
    .select({ seq: entryText.seq })
    .from(entryText)
    .where(eq(entryText.entryId, entryId));
  const rows = await db
    .select({ block: blockResult, outcome: result.outcome, engine: result.engine, computedAt: result.at })
    .from(blockResult)
    .leftJoin(result, eq(result.address, blockResult.address))
    .where(eq(blockResult.entryId, entryId))
    .orderBy(asc(blockResult.position));
  const readings = await db
    .select({
      id: reading.id,
      attachmentId: reading.attachmentId,
      name: attachment.name,
      sha256: attachment.sha256,
      hash: reading.hash,
      problems: reading.problems,
      summary: reading.summary,
      at: reading.at,
    })
    .from(reading)
    .innerJoin(attachment, eq(attachment.id, reading.attachmentId))
    .where(eq(attachment.entryId, entryId))
    .orderBy(asc(reading.at));
  return {
    seq: text?.seq ?? 0,
    blocks: rows.map(({ block, outcome, engine, computedAt }) => ({
      blockId: block.blockId,
      position: block.position,
      status: block.status,
      message: block.message,
      readingIds: block.readingIds,
      settings: block.settings,
      result: outcome && !('failed' in outcome) ? outcome : null,
      engine,
      computedAt: computedAt?.toISOString() ?? null,
      readings: block.readingIds.flatMap((id) => {
        const found = readings.find((one) => one.id === id);
        if (!found) return [];
        const { at: _at, ...shown } = found;
        return [shown];
      }),
    })),
    available: readings.map(({ id, name, sha256, at }) => ({ id, name, sha256, at: at.toISOString() })),
  };
}
