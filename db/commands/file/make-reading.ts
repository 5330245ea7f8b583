import { and, eq, sql } from 'drizzle-orm';
import type { ReadingSpec, ReadingSummary } from '../../../analysis/intake/types';
import type { Database } from '../../client';
import { readingHash } from '../../integrity/addresses';
import type { Actor } from '../../policies/may';
import { getAttachmentFor } from '../../queries/file/get-attachment-for';
import { audit, reading } from '../../schema/index';

/**
 * Keeps how an attachment is read, as a person confirmed it. Readings are never changed: the same file read the same way is
 * the same reading, anything else is a new one.
 * @param input.summary - what this server found when it read the file with this spec.
 * @throws AppError as getEntryFor for 'reading.create'.
 */
export async function makeReading(
  db: Database,
  actor: Actor,
  input: { attachmentId: string; spec: ReadingSpec; summary: ReadingSummary; problems: number },
): Promise<{ readingId: string; hash: string }> {
  return db.transaction(async (tx) => {
    const file = await getAttachmentFor(tx, actor, input.attachmentId, 'reading.create');
    const hash = readingHash(file.sha256, input.spec);
    // Confirmed twice at the same moment, it is still one: the second waits and finds what the first has made.
    await tx.execute(sql`SELECT pg_advisory_xact_lock(hashtextextended(${`reading ${file.id} ${hash}`}, 0))`);
    const [known] = await tx
      .select({ id: reading.id })
      .from(reading)
      .where(and(eq(reading.attachmentId, file.id), eq(reading.hash, hash)));
    if (known) return { readingId: known.id, hash };
    const [row] = await tx
      .insert(reading)
      .values({
        attachmentId: file.id,
        hash,
        spec: input.spec,
        summary: input.summary,
        problems: input.problems,
        personId: actor.personId,
      })
      .returning({ id: reading.id });
    if (!row) throw new Error('insert of a reading returned no row');
    await tx.insert(audit).values({
      kind: 'reading.create',
      personId: actor.personId,
      loginId: actor.loginId,
      entryId: file.entryId,
      subject: row.id,
      after: { attachment: file.id, hash },
    });
    return { readingId: row.id, hash };
  });
}
