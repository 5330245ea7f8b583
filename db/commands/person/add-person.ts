import { eq, or } from 'drizzle-orm';
import type { Database } from '../../client';
import { AppError } from '../../errors';
import type { AddPersonInput, GroupInput } from '../../inputs/person';
import { audit, lab, person } from '../../schema/index';
import { hashPassword } from '../login/start-login';
import { whatIsTaken } from './what-is-taken';

/**
 * Makes an account from the server's command line: whoever may read the database's password needs no account to do so,
 * and the first person of an installation has nobody to be invited by.
 * @param group - used only when the installation has no group yet.
 * @throws AppError bad-input - login name or address belongs to somebody, also to a closed account.
 */
export async function addPerson(
  db: Database,
  input: AddPersonInput,
  group: GroupInput,
): Promise<{ personId: string }> {
  const { password, ...given } = input;
  const passwordHash = await hashPassword(password);
  return db.transaction(async (tx) => {
    const [made] = await tx
      .insert(person)
      .values({ ...given, passwordHash })
      .onConflictDoNothing()
      .returning({ id: person.id });
    if (!made) {
      const taken = await tx
        .select({ login: person.login })
        .from(person)
        .where(or(eq(person.login, given.login), eq(person.email, given.email)));
      throw new AppError('bad-input', { fields: whatIsTaken(taken, given) });
    }
    await tx.insert(lab).values(group).onConflictDoNothing();
    await tx.insert(audit).values({
      kind: 'person.create',
      personId: made.id,
      subject: given.login,
      after: given,
      reason: 'made on the server with add-person',
    });
    return { personId: made.id };
  });
}
