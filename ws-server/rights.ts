import { and, eq } from 'drizzle-orm';
import type { Database } from '../db/client';
import type { Actor, MemberRole } from '../db/policies/may';
import { findActor } from '../db/queries/login/find-actor';
import { entry, notebookMember } from '../db/schema/index';

/** The actor's place in the notebook of an entry; null when there is no such entry or no place. */
export async function findRole(db: Database, entryId: string, personId: string): Promise<MemberRole | null> {
  const [row] = await db
    .select({ role: notebookMember.role })
    .from(entry)
    .innerJoin(notebookMember, eq(notebookMember.notebookId, entry.notebookId))
    .where(and(eq(entry.id, entryId), eq(notebookMember.personId, personId)));
  return row?.role ?? null;
}

/** Everything that decides about an open socket, asked anew. */
export async function findRights(
  db: Database,
  entryId: string,
  loginId: string,
): Promise<{ actor: Actor | null; role: MemberRole | null }> {
  const actor = await findActor(db, loginId);
  return { actor, role: actor && (await findRole(db, entryId, actor.personId)) };
}
