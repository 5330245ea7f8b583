import { eq, sql } from 'drizzle-orm';
import type { Database } from '../../client';
import { AppError } from '../../errors';
import { safeName } from '../../files/safe-name';
import { attachment, audit, uploadTicket } from '../../schema/index';

export interface FinishedUpload {
  readonly attachmentId: string;
  readonly name: string;
  readonly bytes: number;
  readonly sha256: string;
}

/**
 * Turns a finished upload into an attachment of its entry. Told twice about the same file, it answers the same.
 * @param input.bytes, input.sha256 - measured by this server, never what the browser said.
 * @throws AppError forbidden - nobody started this upload here.
 */
export async function finishUpload(
  db: Database,
  input: { ticketId: string; storageKey: string; mediaType: string; bytes: number; sha256: string },
): Promise<FinishedUpload> {
  return db.transaction(async (tx) => {
    const [ticket] = await tx
      .select()
      .from(uploadTicket)
      .where(eq(uploadTicket.id, input.ticketId))
      .for('update');
    if (!ticket) throw new AppError('forbidden', { message: `no upload ${input.ticketId} was started` });
    const [known] = await tx.select().from(attachment).where(eq(attachment.storageKey, input.storageKey));
    if (known) return { attachmentId: known.id, name: known.name, bytes: known.bytes, sha256: known.sha256 };
    if (ticket.finishedAt)
      throw new AppError('forbidden', { message: `upload ${input.ticketId} was finished before` });
    const name = safeName(ticket.name);
    const [row] = await tx
      .insert(attachment)
      .values({
        entryId: ticket.entryId,
        name,
        mediaType: input.mediaType,
        bytes: input.bytes,
        sha256: input.sha256,
        storageKey: input.storageKey,
        personId: ticket.personId,
      })
      .returning({ id: attachment.id });
    if (!row) throw new Error('insert of an attachment returned no row');
    await tx
      .update(uploadTicket)
      .set({ finishedAt: sql`motebook_now()` })
      .where(eq(uploadTicket.id, ticket.id));
    await tx.insert(audit).values({
      kind: 'attachment.add',
      personId: ticket.personId,
      loginId: ticket.loginId,
      entryId: ticket.entryId,
      subject: row.id,
      after: { name, bytes: input.bytes, sha256: input.sha256 },
    });
    return { attachmentId: row.id, name, bytes: input.bytes, sha256: input.sha256 };
  });
}
