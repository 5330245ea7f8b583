import { eq } from 'drizzle-orm';
import type { Connection } from '../../client';
import { AppError } from '../../errors';
import type { Actor } from '../../policies/may';
import { attachment } from '../../schema/index';
import { getEntryFor, type EntryAction } from '../entry/get-entry-for';

/** An attachment, after the policy has allowed `action` on its entry. @throws AppError not-found | forbidden | locked. */
export async function getAttachmentFor(
  db: Connection,
  actor: Actor,
  attachmentId: string,
  action: EntryAction,
) {
  const [row] = await db.select().from(attachment).where(eq(attachment.id, attachmentId));
  if (!row) throw new AppError('not-found');
  await getEntryFor(db, actor, row.entryId, action);
  return row;
}
