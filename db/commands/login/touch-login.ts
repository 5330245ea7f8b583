import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Connection } from '../../client';
import { login } from '../../schema/index';

/** Notes that a person is at work, at most once a minute so that reading does not write all the time. */
export async function touchLogin(db: Connection, loginId: string): Promise<void> {
  await db
    .update(login)
    .set({ seenAt: sql`motebook_now()` })
    .where(
      and(
        eq(login.id, loginId),
        isNull(login.endedAt),
        sql`${login.seenAt} < motebook_now() - interval '1 minute'`,
      ),
    );
}
