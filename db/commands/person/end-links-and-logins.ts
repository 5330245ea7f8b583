import { and, eq, isNull, ne, sql } from 'drizzle-orm';
import type { Transaction } from '../../client';
import { login, passwordLink } from '../../schema/index';

/** Ends every link to set a password that somebody still has. */
export async function endLinks(tx: Transaction, personId: string): Promise<void> {
  await tx
    .update(passwordLink)
    .set({ endedAt: sql`motebook_now()` })
    .where(and(eq(passwordLink.personId, personId), isNull(passwordLink.endedAt)));
}

/** Ends somebody's logins, all but `kept`; a trigger tells the websocket servers, which close their sockets. */
export async function endLogins(tx: Transaction, personId: string, kept?: string): Promise<number> {
  const ended = await tx
    .update(login)
    .set({ endedAt: sql`motebook_now()` })
    .where(
      and(
        eq(login.personId, personId),
        isNull(login.endedAt),
        kept === undefined ? undefined : ne(login.id, kept),
      ),
    )
    .returning({ id: login.id });
  return ended.length;
}
