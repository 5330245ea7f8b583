import { createHash } from 'node:crypto';
import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Connection, Database } from '../../client';
import { AppError } from '../../errors';
import type { SetPasswordInput } from '../../inputs/person';
import { weakPassword } from '../../inputs/weak-password';
import { forgetWrongPasswords } from '../../limits/sign-in';
import { takeAttempts } from '../../limits/take-attempt';
import { findLab } from '../../queries/lab/find-lab';
import { audit, passwordLink, person } from '../../schema/index';
import { hashPassword } from '../login/start-login';
import { endLinks, endLogins } from './end-links-and-logins';
import { queueMail } from './queue-mail';

export const hashSecret = (secret: string): Buffer => createHash('sha256').update(secret).digest();

const DEAD = 'This link has expired or was used already. Ask for a new one.';

/**
 * Sets a password with the link from a mail. The link then works no more, and every login of the account is ended.
 * @param address - network address of the asker.
 * @throws AppError not-found - the link does not work (any more); bad-input - the password would soon be guessed;
 * SlowDown - too many links tried from this address.
 */
export async function setPassword(
  db: Database,
  input: SetPasswordInput,
  address: string,
): Promise<{ login: string }> {
  await takeAttempts(db, [{ kind: 'link.address', key: address }]);
  const secretHash = hashSecret(input.secret);
  const living = and(
    eq(passwordLink.secretHash, secretHash),
    isNull(passwordLink.endedAt),
    sql`${passwordLink.expiresAt} > motebook_now()`,
  );
  const [found] = await db
    .select({ id: person.id, login: person.login, email: person.email, name: person.name })
    .from(passwordLink)
    .innerJoin(person, eq(person.id, passwordLink.personId))
    .where(and(living, eq(person.active, true)));
  if (!found) throw new AppError('not-found', { sentence: DEAD });
  await refuseWeak(db, input.password, found, 'password');
  const passwordHash = await hashPassword(input.password);
  await db.transaction(async (tx) => {
    // Asked again in the change itself: of two that use the link at once, one finds it ended.
    const [used] = await tx
      .update(passwordLink)
      .set({ endedAt: sql`motebook_now()` })
      .where(living)
      .returning({ kind: passwordLink.kind });
    if (!used) throw new AppError('not-found', { sentence: DEAD });
    const [changed] = await tx
      .update(person)
      .set({ passwordHash })
      .where(and(eq(person.id, found.id), eq(person.active, true)))
      .returning({ id: person.id });
    if (!changed) throw new AppError('not-found', { sentence: DEAD });
    await endLinks(tx, found.id);
    await endLogins(tx, found.id);
    await tx.insert(audit).values({
      kind: 'password.set',
      personId: found.id,
      subject: found.login,
      reason: used.kind,
    });
    if (used.kind === 'reset') await queueMail(tx, { kind: 'password-changed', personId: found.id });
    await forgetWrongPasswords(tx, [found.login, found.email]);
  });
  return { login: found.login };
}

/** @throws AppError bad-input - with the reason beside `field`. */
export async function refuseWeak(
  db: Connection,
  password: string,
  who: { login: string; email: string; name: string },
  field: string,
): Promise<void> {
  const lab = await findLab(db);
  const weak = weakPassword(password, [who.login, who.email, who.name, lab?.name ?? '']);
  if (weak) throw new AppError('bad-input', { fields: { [field]: weak } });
}
