import { and, eq, sql } from 'drizzle-orm';
import type { Database, Transaction } from '../../client';
import { AppError } from '../../errors';
import type { AddMemberInput, ChangeMemberInput } from '../../inputs/notebook';
import { may, type Actor, type MemberRole } from '../../policies/may';
import { audit, notebook, notebookMember, person } from '../../schema/index';

/** Locks the notebook, so that two owners cannot leave it without one. @throws AppError not-found | forbidden. */
async function lockOwned(tx: Transaction, actor: Actor, notebookId: string): Promise<void> {
  const [row] = await tx
    .select({ member: notebookMember.role, archivedAt: notebook.archivedAt })
    .from(notebook)
    .innerJoin(
      notebookMember,
      and(eq(notebookMember.notebookId, notebook.id), eq(notebookMember.personId, actor.personId)),
    )
    .where(eq(notebook.id, notebookId))
    .for('update');
  // Who is not a member does not learn that the notebook exists.
  if (!row) throw new AppError('not-found');
  if (!may(actor, 'notebook.members', { member: row.member, archived: row.archivedAt !== null }))
    throw new AppError('forbidden', { sentence: 'Members are changed by the owners of a notebook.' });
}

function refuseUnfit(role: MemberRole, personRole: string): void {
  if (personRole === 'guest' && role !== 'reader')
    throw new AppError('bad-input', { fields: { role: 'A guest can only be a reader.' } });
}

async function refuseLastOwner(tx: Transaction, notebookId: string, personId: string): Promise<void> {
  const [other] = await tx
    .select({ id: person.id })
    .from(notebookMember)
    .innerJoin(person, eq(person.id, notebookMember.personId))
    .where(
      and(
        eq(notebookMember.notebookId, notebookId),
        eq(notebookMember.role, 'owner'),
        eq(person.active, true),
        sql`${notebookMember.personId} <> ${personId}::uuid`,
      ),
    )
    .limit(1);
  if (!other)
    throw new AppError('conflict', { sentence: 'A notebook needs an owner. Make somebody else one first.' });
}

async function note(
  tx: Transaction,
  actor: Actor,
  given: { notebookId: string; login: string; before: MemberRole | null; after: MemberRole | null },
): Promise<void> {
  await tx.insert(audit).values({
    kind: 'notebook.member',
    personId: actor.personId,
    loginId: actor.loginId,
    notebookId: given.notebookId,
    subject: given.login,
    before: given.before && { role: given.before },
    after: given.after && { role: given.after },
  });
}

/**
 * Adds somebody to a notebook. Takes effect at once, also in their open pages.
 * @throws AppError not-found | forbidden - not an owner; bad-input - nobody of that name, a member already, a guest as more
 * than a reader.
 */
export async function addMember(db: Database, actor: Actor, input: AddMemberInput): Promise<void> {
  await db.transaction(async (tx) => {
    await lockOwned(tx, actor, input.notebookId);
    const [who] = await tx
      .select({ id: person.id, login: person.login, role: person.role })
      .from(person)
      .where(
        and(eq(person.active, true), sql`(${person.login} = ${input.who} or ${person.email} = ${input.who})`),
      );
    if (!who)
      throw new AppError('bad-input', {
        fields: {
          who: 'Nobody here has this login name or address. Check it, or ask an administrator to invite them.',
        },
      });
    refuseUnfit(input.role, who.role);
    const added = await tx
      .insert(notebookMember)
      .values({ notebookId: input.notebookId, personId: who.id, role: input.role })
      .onConflictDoNothing()
      .returning({ role: notebookMember.role });
    if (added.length === 0)
      throw new AppError('bad-input', { fields: { who: 'They belong to this notebook already.' } });
    await note(tx, actor, {
      notebookId: input.notebookId,
      login: who.login,
      before: null,
      after: input.role,
    });
  });
}

/**
 * Gives a member another role, or ends the membership. What they wrote stays theirs.
 * @throws AppError not-found | forbidden; conflict - the last owner; bad-input - a guest as more than a reader.
 */
export async function changeMember(db: Database, actor: Actor, input: ChangeMemberInput): Promise<void> {
  const { notebookId, personId, role } = input;
  await db.transaction(async (tx) => {
    await lockOwned(tx, actor, notebookId);
    const one = and(eq(notebookMember.notebookId, notebookId), eq(notebookMember.personId, personId));
    const [member] = await tx
      .select({ before: notebookMember.role, login: person.login, personRole: person.role })
      .from(notebookMember)
      .innerJoin(person, eq(person.id, notebookMember.personId))
      .where(one);
    if (!member) throw new AppError('not-found');
    if (member.before === role) return;
    if (role !== null) refuseUnfit(role, member.personRole);
    if (member.before === 'owner') await refuseLastOwner(tx, notebookId, personId);
    if (role === null) await tx.delete(notebookMember).where(one);
    else await tx.update(notebookMember).set({ role }).where(one);
    await note(tx, actor, { notebookId, login: member.login, before: member.before, after: role });
  });
}
