import type { Database } from '../../client';
import { safeName } from '../../files/safe-name';
import type { Actor } from '../../policies/may';
import { getEntryFor } from '../../queries/entry/get-entry-for';
import { uploadTicket } from '../../schema/index';

/** Notes that somebody starts an upload to an entry. @throws AppError as getEntryFor for 'attachment.add'. */
export async function startUpload(
  db: Database,
  actor: Actor,
  input: { entryId: string; name: string; bytes: number },
): Promise<{ ticketId: string }> {
  return db.transaction(async (tx) => {
    await getEntryFor(tx, actor, input.entryId, 'attachment.add');
    const [row] = await tx
      .insert(uploadTicket)
      .values({
        entryId: input.entryId,
        personId: actor.personId,
        loginId: actor.loginId,
        name: safeName(input.name),
        bytes: input.bytes,
      })
      .returning({ id: uploadTicket.id });
    if (!row) throw new Error('insert of an upload returned no row');
    return { ticketId: row.id };
  });
}
