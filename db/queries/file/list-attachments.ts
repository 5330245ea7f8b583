import { asc, eq } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { Actor } from '../../policies/may';
import { attachment, person } from '../../schema/index';
import { getEntryFor } from '../entry/get-entry-for';

/** Files of an entry, oldest first. @throws AppError not-found. */
export async function listAttachments(db: Connection, actor: Actor, entryId: string) {
  await getEntryFor(db, actor, entryId, 'attachment.read');
  return db
    .select({
      id: attachment.id,
      name: attachment.name,
      mediaType: attachment.mediaType,
      bytes: attachment.bytes,
      sha256: attachment.sha256,
      by: person.name,
      at: attachment.at,
    })
    .from(attachment)
    .innerJoin(person, eq(person.id, attachment.personId))
    .where(eq(attachment.entryId, entryId))
    .orderBy(asc(attachment.at));
}
