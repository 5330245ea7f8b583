import { asc, eq, inArray } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { BlockAnswer } from '../../inputs/block-answer';
import type { Actor } from '../../policies/may';
import { attachment, blockResult, entryText, reading, result } from '../../schema/index';
import { getEntryFor } from '../entry/get-entry-for';

/** Diffusion blocks of an entry with their current results, as the projector wrote them. @throws AppError not-found. */
export async function listBlocks(db: Connection, actor: Actor, entryId: string): Promise<BlockAnswer> {
  await getEntryFor(db, actor, entryId, 'entry.read');
  const [text] = await db
    .select({ seq: entryText.seq })
    .from(entryText)
    .where(eq(entryText.entryId, entryId));
  const rows = await db
    .select({ block: blockResult, outcome: result.outcome, computedAt: result.at })
    .from(blockResult)
    .leftJoin(result, eq(result.address, blockResult.address))
    .where(eq(blockResult.entryId, entryId))
    .orderBy(asc(blockResult.position));
  const ids = [...new Set(rows.flatMap((row) => row.block.readingIds))];
  const readings =
    ids.length === 0
      ? []
      : await db
          .select({
            id: reading.id,
            attachmentId: reading.attachmentId,
            name: attachment.name,
            sha256: attachment.sha256,
            hash: reading.hash,
            problems: reading.problems,
            summary: reading.summary,
            entryId: attachment.entryId,
          })
          .from(reading)
          .innerJoin(attachment, eq(attachment.id, reading.attachmentId))
          .where(inArray(reading.id, ids));
  return {
    seq: text?.seq ?? 0,
    blocks: rows.map(({ block, outcome, computedAt }) => ({
      blockId: block.blockId,
      position: block.position,
      status: block.status,
      message: block.message,
      readingIds: block.readingIds,
      settings: block.settings,
      result: outcome && !('failed' in outcome) ? outcome : null,
      computedAt: computedAt?.toISOString() ?? null,
      readings: block.readingIds.flatMap((id) => {
        // A forged id of another entry's reading tells nothing here.
        const found = readings.find((one) => one.id === id && one.entryId === entryId);
        if (!found) return [];
        const { entryId: _entry, ...shown } = found;
        return [shown];
      }),
    })),
  };
}
