import { and, eq, or } from 'drizzle-orm';
import type { Database } from '../../client';
import { AppError } from '../../errors';
import type { InviteInput } from '../../inputs/person';
import { may, type Actor } from '../../policies/may';
import { audit, notebookMember, person } from '../../schema/index';
import { queueMail } from './queue-mail';
import { whatIsTaken } from './what-is-taken';

/**
 * Makes an account without a password and sends its owner a link to choose one.
 * @throws AppError forbidden - not an administrator, and not a PI who invites into a notebook of their own; bad-input -
 * the login name or address belongs to somebody, also to a closed account.
 */
export async function invitePerson(
  db: Database,
  actor: Actor,
  input: InviteInput,
): Promise<{ personId: string }> {
  const { notebookId, memberRole, ...given } = input;
  return db.transaction(async (tx) => {
    const [place] = notebookId
      ? await tx
          .select({ role: notebookMember.role })
          .from(notebookMember)
          .where(and(eq(notebookMember.notebookId, notebookId), eq(notebookMember.personId, actor.personId)))
      : [];
    if (!may(actor, 'person.invite', { ...given, notebook: place?.role ?? (notebookId ? 'reader' : null) })) {
      throw new AppError('forbidden', {
        sentence:
          'A PI invites researchers and guests to notebooks of their own; an administrator invites anybody.',
      });
    }
    if (given.admin && given.role === 'guest')
      throw new AppError('bad-input', { fields: { admin: 'A guest cannot be an administrator.' } });
    if (given.role === 'guest' && memberRole !== 'reader' && notebookId)
      throw new AppError('bad-input', { fields: { memberRole: 'A guest can only read.' } });
    const [made] = await tx
      .insert(person)
      .values({ ...given, passwordHash: null })
      .onConflictDoNothing()
      .returning({ id: person.id });
    if (!made) {
      const taken = await tx
        .select({ login: person.login })
        .from(person)
        .where(or(eq(person.login, given.login), eq(person.email, given.email)));
      throw new AppError('bad-input', { fields: whatIsTaken(taken, given) });
    }
    if (notebookId)
      await tx.insert(notebookMember).values({ notebookId, personId: made.id, role: memberRole });
    await queueMail(tx, { kind: 'invitation', personId: made.id, details: { inviter: actor.name } });
    await tx.insert(audit).values({
      kind: 'person.create',
      personId: actor.personId,
      loginId: actor.loginId,
      notebookId,
      subject: given.login,
      after: { ...given, ...(notebookId ? { notebookId, memberRole } : {}) },
      reason: 'invited',
    });
    return { personId: made.id };
  });
}
