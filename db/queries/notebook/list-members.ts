import { eq } from 'drizzle-orm';
import type { Connection } from '../../client';
import { may, type Actor, type MemberRole, type PersonRole } from '../../policies/may';
import { notebookMember, person } from '../../schema/index';

export interface Member {
  readonly personId: string;
  readonly name: string;
  readonly login: string;
  readonly personRole: PersonRole;
  readonly active: boolean;
  readonly role: MemberRole;
}

/** Members of a notebook for those who may change them, by name; null for anybody else. */
export async function listMembers(
  db: Connection,
  actor: Actor,
  notebookId: string,
): Promise<Member[] | null> {
  const rows = await db
    .select({
      personId: person.id,
      name: person.name,
      login: person.login,
      personRole: person.role,
      active: person.active,
      role: notebookMember.role,
    })
    .from(notebookMember)
    .innerJoin(person, eq(person.id, notebookMember.personId))
    .where(eq(notebookMember.notebookId, notebookId))
    .orderBy(person.name, person.id);
  const own = rows.find((row) => row.personId === actor.personId)?.role ?? null;
  return may(actor, 'notebook.members', { member: own }) ? rows : null;
}
