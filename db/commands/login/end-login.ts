import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Database } from '../../client';
import { audit, login } from '../../schema/index';

/** Ends a login: its cookie opens nothing any more, and its open sockets are closed. Ending it twice is harmless. */
export async function endLogin(db: Database, loginId: string): Promise<void> {
  await db.transaction(async (tx) => {
    const [row] = await tx
      .update(login)
      .set({ endedAt: sql`motebook_now()` })
      .where(and(eq(login.id, loginId), isNull(login.endedAt)))
      .returning({ personId: login.personId });
    if (row) await tx.insert(audit).values({ kind: 'login.end', personId: row.personId, loginId });
  });
}
