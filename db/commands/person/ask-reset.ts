import type { Database } from '../../client';
import { takeAttempts } from '../../limits/take-attempt';
import { audit } from '../../schema/index';
import { queueMail } from './queue-mail';

/**
 * Somebody who cannot sign in asks for a link. Whether anybody has this name is found out later, by the mail process, so
 * that the answer and its time are the same for every name (S08).
 * @param name - login name or e-mail, folded. @param address - the asker's network address.
 * @throws SlowDown - asked too often, for this name or from this address.
 */
export async function askReset(db: Database, name: string, address: string): Promise<void> {
  await takeAttempts(db, [
    { kind: 'reset.address', key: address },
    { kind: 'reset.name', key: name },
  ]);
  await db.transaction(async (tx) => {
    await queueMail(tx, { kind: 'reset', details: { asked: name } });
    await tx.insert(audit).values({ kind: 'password.reset-ask', subject: name.slice(0, 100) });
  });
}
