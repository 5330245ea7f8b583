import { eq } from 'drizzle-orm';
import type { Database } from '../../client';
import { AppError } from '../../errors';
import { may, type Actor } from '../../policies/may';
import { audit, login } from '../../schema/index';
import { endLogins } from '../person/end-links-and-logins';
import { endLogin } from './end-login';

/** Ends a login of one's own; an administrator ends anybody's (S18). @throws AppError not-found - no such login, or not one's own. */
export async function endOtherLogin(db: Database, actor: Actor, loginId: string): Promise<void> {
  const [row] = await db.select({ personId: login.personId }).from(login).where(eq(login.id, loginId));
  if (!row || (row.personId !== actor.personId && !may(actor, 'person.manage', null)))
    throw new AppError('not-found');
  await endLogin(db, loginId);
  if (row.personId === actor.personId) return;
  await db.insert(audit).values({
    kind: 'login.end-other',
    personId: actor.personId,
    loginId: actor.loginId,
    subject: loginId,
  });
}

/** Ends all of one's own logins but the one that asks. @returns how many. */
export async function endOtherLogins(db: Database, actor: Actor): Promise<{ ended: number }> {
  return db.transaction(async (tx) => {
    const ended = await endLogins(tx, actor.personId, actor.loginId);
    await tx.insert(audit).values({
      kind: 'login.end-others',
      personId: actor.personId,
      loginId: actor.loginId,
      after: { ended },
    });
    return { ended };
  });
}
