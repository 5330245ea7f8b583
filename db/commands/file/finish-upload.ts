import { eq, sql } from 'drizzle-orm';
import type { Database, Transaction } from '../../client';
import { AppError } from '../../errors';
import { safeName } from '../../files/safe-name';
import type { Actor } from '../../policies/may';
import { getEntryFor } from '../../queries/entry/get-entry-for';
import { attachment, audit, person, uploadTicket } from '../../schema/index';

export interface FinishedUpload {
  readonly attachmentId: string;
  readonly name: string;
  readonly bytes: number;
  readonly sha256: string;
}

/**
 * Turns a finished upload into an attachment of its entry. Told twice about the same file, it answers the same. Bytes may
 * take long to arrive: whether the person may still add them is asked again.
 * @param input.bytes, input.sha256 - measured by this server, never what the browser said.
 * @throws AppError forbidden - nobody started this upload here.   @throws AppError as getEntryFor for 'attachment.add'.
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
    if (known && (known.entryId !== ticket.entryId || known.personId !== ticket.personId))
      throw new AppError('forbidden', {
        message: `the file of upload ${input.ticketId} is another upload's`,
      });
    if (known) return { attachmentId: known.id, name: known.name, bytes: known.bytes, sha256: known.sha256 };
    if (ticket.finishedAt)
      throw new AppError('forbidden', { message: `upload ${input.ticketId} was finished before` });
    await getEntryFor(tx, await uploader(tx, ticket), ticket.entryId, 'attachment.add', { lock: true });
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

/** Who started an upload, as the database knows them now. Signing out since then takes nothing back; losing a right does. */
async function uploader(tx: Transaction, ticket: { personId: string; loginId: string }): Promise<Actor> {
  const [row] = await tx.select().from(person).where(eq(person.id, ticket.personId));
  if (!row) throw new Error('a person of an upload is gone');
  const { login, name, role, admin, active } = row;
  return { personId: row.id, loginId: ticket.loginId, login, name, role, admin, active };
}
