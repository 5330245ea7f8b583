import { and, eq } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { Connection, Database } from '../../client';
import { AppError } from '../../errors';
import { may, type Actor } from '../../policies/may';
import { audit, notebookMember, person } from '../../schema/index';
import { queueMail } from './queue-mail';

/** Whether somebody belongs to a notebook that the actor owns. */
export async function isInOwnNotebook(db: Connection, actor: Actor, personId: string): Promise<boolean> {
  const mine = alias(notebookMember, 'mine');
  const [row] = await db
    .select({ id: notebookMember.notebookId })
    .from(notebookMember)
    .innerJoin(
      mine,
      and(
        eq(mine.notebookId, notebookMember.notebookId),
        eq(mine.personId, actor.personId),
        eq(mine.role, 'owner'),
      ),
    )
    .where(eq(notebookMember.personId, personId))
    .limit(1);
  return row !== undefined;
}

/**
 * Sends somebody a link to choose a password: the invitation again, or a reset. The one who asks for it never sees it (R10).
 * @throws AppError not-found; forbidden; conflict - the account is closed.
 */
export async function sendLink(db: Database, actor: Actor, personId: string): Promise<void> {
  await db.transaction(async (tx) => {
    const [who] = await tx
      .select({ login: person.login, active: person.active, passwordHash: person.passwordHash })
      .from(person)
      .where(eq(person.id, personId));
    const invited = who?.passwordHash === null;
    const inOwnNotebook = await isInOwnNotebook(tx, actor, personId);
    if (!may(actor, 'person.send-link', { invited, inOwnNotebook }))
      throw new AppError('forbidden', { sentence: 'Only an administrator can send this mail.' });
    if (!who) throw new AppError('not-found');
    if (!who.active) throw new AppError('conflict', { sentence: 'This account is closed. Open it first.' });
    await queueMail(
      tx,
      invited
        ? { kind: 'invitation', personId, details: { inviter: actor.name } }
        : { kind: 'reset', personId },
    );
    await tx.insert(audit).values({
      kind: invited ? 'person.invite-again' : 'password.reset-start',
      personId: actor.personId,
      loginId: actor.loginId,
      subject: who.login,
    });
  });
}
