import { and, eq, ne, sql } from 'drizzle-orm';
import type { Database, Transaction } from '../../client';
import { AppError } from '../../errors';
import type { ChangeRoleInput, DeactivateInput, HandOverInput } from '../../inputs/person';
import { may, type Actor } from '../../policies/may';
import { audit, notebookMember, person } from '../../schema/index';
import { endLinks, endLogins } from './end-links-and-logins';

function refuseOthers(actor: Actor): void {
  if (!may(actor, 'person.manage', null))
    throw new AppError('forbidden', { sentence: 'Only an administrator can do this.' });
}

/** The person as they are, locked until the end of the transaction. @throws AppError not-found. */
async function lockPerson(tx: Transaction, personId: string) {
  // One at a time, or two administrators could take the flag from each other and leave none.
  await tx.execute(sql`SELECT pg_advisory_xact_lock(hashtext('motebook administrators'))`);
  const [who] = await tx
    .select({ login: person.login, role: person.role, admin: person.admin, active: person.active })
    .from(person)
    .where(eq(person.id, personId))
    .for('update');
  if (!who) throw new AppError('not-found');
  return who;
}

async function refuseLastAdmin(tx: Transaction, personId: string): Promise<void> {
  const [other] = await tx
    .select({ id: person.id })
    .from(person)
    .where(
      and(
        eq(person.admin, true),
        eq(person.active, true),
        ne(person.id, personId),
        sql`${person.passwordHash} IS NOT NULL`,
      ),
    )
    .limit(1);
  if (!other)
    throw new AppError('conflict', {
      sentence: 'This is the only administrator. Make somebody else one first.',
    });
}

/**
 * Gives somebody another role, or the administrator's flag. Takes effect at once, also in open pages.
 * @throws AppError forbidden; not-found; bad-input - a guest as administrator; conflict - the only administrator.
 */
export async function changeRole(db: Database, actor: Actor, input: ChangeRoleInput): Promise<void> {
  refuseOthers(actor);
  await db.transaction(async (tx) => {
    const { login, role, admin } = await lockPerson(tx, input.personId);
    if (input.admin && input.role === 'guest')
      throw new AppError('bad-input', { fields: { admin: 'A guest cannot be an administrator.' } });
    if (role === input.role && admin === input.admin) return;
    if (admin && !input.admin) await refuseLastAdmin(tx, input.personId);
    const after = { role: input.role, admin: input.admin };
    await tx.update(person).set(after).where(eq(person.id, input.personId));
    await tx.insert(audit).values({
      kind: 'person.role',
      personId: actor.personId,
      loginId: actor.loginId,
      subject: login,
      before: { role, admin },
      after,
    });
  });
}

/**
 * Closes an account: logins, sockets and links end at once; name, id and what was signed stay (integrity rule 2.10).
 * @throws AppError forbidden; not-found; conflict - one's own account, or the only administrator's.
 */
export async function deactivatePerson(db: Database, actor: Actor, input: DeactivateInput): Promise<void> {
  refuseOthers(actor);
  if (input.personId === actor.personId)
    throw new AppError('conflict', {
      sentence: 'You cannot close your own account. Another administrator can.',
    });
  await db.transaction(async (tx) => {
    const who = await lockPerson(tx, input.personId);
    if (!who.active) return;
    if (who.admin) await refuseLastAdmin(tx, input.personId);
    await tx.update(person).set({ active: false }).where(eq(person.id, input.personId));
    const ended = await endLogins(tx, input.personId);
    await endLinks(tx, input.personId);
    await tx.insert(audit).values({
      kind: 'person.close',
      personId: actor.personId,
      loginId: actor.loginId,
      subject: who.login,
      before: { active: true },
      after: { active: false, loginsEnded: ended },
      reason: input.reason,
    });
  });
}

/** Opens a closed account again, with its old password. @throws AppError forbidden; not-found. */
export async function reactivatePerson(db: Database, actor: Actor, personId: string): Promise<void> {
  refuseOthers(actor);
  await db.transaction(async (tx) => {
    const who = await lockPerson(tx, personId);
    if (who.active) return;
    await tx.update(person).set({ active: true }).where(eq(person.id, personId));
    await tx.insert(audit).values({
      kind: 'person.open',
      personId: actor.personId,
      loginId: actor.loginId,
      subject: who.login,
      before: { active: false },
      after: { active: true },
    });
  });
}

/**
 * Makes somebody an owner of every notebook that a leaver owns; the leaver stays in them as a reader, so that who
 * belonged to them can be seen.
 * @returns how many notebooks were handed over.
 * @throws AppError forbidden; not-found; bad-input - the new owner is the same person, a guest, or cannot sign in.
 */
export async function handOver(
  db: Database,
  actor: Actor,
  input: HandOverInput,
): Promise<{ notebooks: number }> {
  refuseOthers(actor);
  return db.transaction(async (tx) => {
    const from = await lockPerson(tx, input.personId);
    const [to] = await tx
      .select({ login: person.login, role: person.role, active: person.active })
      .from(person)
      .where(eq(person.id, input.toPersonId));
    const refuse = (sentence: string) => new AppError('bad-input', { fields: { toPersonId: sentence } });
    if (input.toPersonId === input.personId) throw refuse('Choose somebody else.');
    if (!to?.active) throw refuse('Choose somebody whose account is open.');
    if (to.role === 'guest') throw refuse('A guest cannot own a notebook.');
    const owned = await tx
      .update(notebookMember)
      .set({ role: 'reader' })
      .where(and(eq(notebookMember.personId, input.personId), eq(notebookMember.role, 'owner')))
      .returning({ notebookId: notebookMember.notebookId });
    for (const { notebookId } of owned) {
      await tx
        .insert(notebookMember)
        .values({ notebookId, personId: input.toPersonId, role: 'owner' })
        .onConflictDoUpdate({
          target: [notebookMember.notebookId, notebookMember.personId],
          set: { role: 'owner' },
        });
      await tx.insert(audit).values({
        kind: 'notebook.hand-over',
        personId: actor.personId,
        loginId: actor.loginId,
        notebookId,
        subject: from.login,
        before: { owner: from.login },
        after: { owner: to.login },
      });
    }
    return { notebooks: owned.length };
  });
}
