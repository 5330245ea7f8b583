import type { Transaction } from '../../client';
import type { LetterKind } from '../../mail/letters';
import { mail } from '../../schema/index';

/** Puts a letter into the outbox, in the transaction of what it tells of. The mail process sends it after the commit. */
export async function queueMail(
  tx: Transaction,
  letter: {
    kind: LetterKind;
    personId?: string;
    /** Instead of the person's address on the day of sending. */
    address?: string;
    details?: Readonly<Record<string, string>>;
  },
): Promise<void> {
  await tx.insert(mail).values(letter);
}
