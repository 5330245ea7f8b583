import { hash, verify } from '@node-rs/argon2';
import { eq, or } from 'drizzle-orm';
import type { Database } from '../../client';
import { audit, login, person } from '../../schema/index';

/** argon2id with 46 MiB, one pass, one lane: the floor of the OWASP password storage guidance (algorithm 2 = id). */
const ARGON2 = { algorithm: 2, memoryCost: 47_104, timeCost: 1, parallelism: 1 } as const;

/** Hash of a password for storage (PHC string). The whole password counts, however long. */
export function hashPassword(password: string): Promise<string> {
  return hash(password, ARGON2);
}

// Verified against when the name is unknown, so that unknown names take as long as wrong passwords.
let nobodysHash: Promise<string> | null = null;

/** Whether a password fits a stored hash. Without a hash (nobody, or only invited) none fits, after the same time. */
export async function isPassword(stored: string | null, password: string): Promise<boolean> {
  nobodysHash ??= hashPassword('nobody has this password');
  const right = await verify(stored ?? (await nobodysHash), password);
  return right && stored !== null;
}

/**
 * Checks name and password and starts a login.
 * @param name - login name or e-mail, any case.
 * @returns the login's id, or null when the two do not fit (which of them is not told).
 */
export async function startLogin(
  db: Database,
  input: { name: string; password: string; userAgent: string },
): Promise<{ loginId: string; personId: string } | null> {
  const name = input.name.trim().toLowerCase();
  const [found] = await db
    .select({ id: person.id, passwordHash: person.passwordHash, active: person.active })
    .from(person)
    .where(or(eq(person.login, name), eq(person.email, name)));
  const right = await isPassword(found?.passwordHash ?? null, input.password);
  return db.transaction(async (tx) => {
    if (!found || !right || !found.active) {
      await tx
        .insert(audit)
        .values({ kind: 'login.failed', personId: found?.id ?? null, subject: name.slice(0, 100) });
      return null;
    }
    const [row] = await tx
      .insert(login)
      .values({ personId: found.id, userAgent: input.userAgent.slice(0, 300) })
      .returning({ id: login.id });
    if (!row) throw new Error('insert of a login returned no row');
    await tx.insert(audit).values({ kind: 'login.start', personId: found.id, loginId: row.id });
    return { loginId: row.id, personId: found.id };
  });
}
