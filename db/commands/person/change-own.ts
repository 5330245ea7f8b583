import { eq } from 'drizzle-orm';
import type { Database } from '../../client';
import { AppError } from '../../errors';
import type { ChangeEmailInput, ChangePasswordInput } from '../../inputs/person';
import { settlePasswordAttempt, takePasswordAttempt } from '../../limits/sign-in';
import type { Actor } from '../../policies/may';
import { audit, person } from '../../schema/index';
import { hashPassword, isPassword } from '../login/start-login';
import { endLinks, endLogins } from './end-links-and-logins';
import { queueMail } from './queue-mail';
import { refuseWeak } from './set-password';

/**
 * Asks the person at the keyboard for their password once more, counted as sign-in counts.
 * @throws AppError bad-input - wrong; SlowDown - wrong too often.
 */
export async function proveOwnPassword(
  db: Database,
  actor: Actor,
  password: string,
): Promise<{ login: string; email: string; name: string }> {
  await takePasswordAttempt(db, actor.login, null);
  const [me] = await db
    .select({ login: person.login, email: person.email, name: person.name, hash: person.passwordHash })
    .from(person)
    .where(eq(person.id, actor.personId));
  if (!me || !(await isPassword(me.hash, password))) {
    await db.insert(audit).values({
      kind: 'password.wrong',
      personId: actor.personId,
      loginId: actor.loginId,
    });
    throw new AppError('bad-input', { fields: { current: 'This is not your present password.' } });
  }
  await settlePasswordAttempt(db, actor.login, null);
  return me;
}

/** Changes one's own password and ends all other logins (S05). @throws as proveOwnPassword; bad-input - a weak one. */
export async function changePassword(db: Database, actor: Actor, input: ChangePasswordInput): Promise<void> {
  const me = await proveOwnPassword(db, actor, input.current);
  await refuseWeak(db, input.password, me, 'password');
  const passwordHash = await hashPassword(input.password);
  await db.transaction(async (tx) => {
    await tx.update(person).set({ passwordHash }).where(eq(person.id, actor.personId));
    await endLinks(tx, actor.personId);
    await endLogins(tx, actor.personId, actor.loginId);
    await tx.insert(audit).values({
      kind: 'password.change',
      personId: actor.personId,
      loginId: actor.loginId,
      subject: actor.login,
    });
    await queueMail(tx, { kind: 'password-changed', personId: actor.personId });
  });
}

/** Changes the name that is printed from now on; what is signed keeps the name of its day. */
export async function changeName(db: Database, actor: Actor, name: string): Promise<void> {
  await db.transaction(async (tx) => {
    const [before] = await tx
      .select({ name: person.name })
      .from(person)
      .where(eq(person.id, actor.personId))
      .for('update');
    if (!before || before.name === name) return;
    await tx.update(person).set({ name }).where(eq(person.id, actor.personId));
    await tx.insert(audit).values({
      kind: 'person.name',
      personId: actor.personId,
      loginId: actor.loginId,
      subject: actor.login,
      before,
      after: { name },
    });
  });
}

/** Changes one's address; the old and the new one are told (S12). @throws as proveOwnPassword; bad-input - it is taken. */
export async function changeEmail(db: Database, actor: Actor, input: ChangeEmailInput): Promise<void> {
  const me = await proveOwnPassword(db, actor, input.current);
  if (me.email === input.email) return;
  await db.transaction(async (tx) => {
    const taken = { email: `Somebody has the address ${input.email}. One person has one account.` };
    const [other] = await tx.select({ id: person.id }).from(person).where(eq(person.email, input.email));
    if (other) throw new AppError('bad-input', { fields: taken });
    await tx.update(person).set({ email: input.email }).where(eq(person.id, actor.personId));
    // A link that waits in the old mailbox must not open the account any more.
    await endLinks(tx, actor.personId);
    await tx.insert(audit).values({
      kind: 'person.email',
      personId: actor.personId,
      loginId: actor.loginId,
      subject: actor.login,
      before: { email: me.email },
      after: { email: input.email },
    });
    for (const address of [me.email, input.email]) {
      const details = { newAddress: input.email };
      await queueMail(tx, { kind: 'address-changed', personId: actor.personId, address, details });
    }
  });
}
