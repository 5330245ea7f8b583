import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { Actor } from '../../policies/may';
import { login, person } from '../../schema/index';
import { LOGIN_IDLE_MINUTES, LOGIN_TOTAL_HOURS } from '../../session-cookie';

/**
 * The person behind a login, as the database knows them now; null when the login has ended, is too old or idle, or the
 * account is deactivated. Asked on every request and every websocket join, so that ending a login takes effect at once.
 * @param loginId - UUID; anything else finds nobody.
 */
export async function findActor(db: Connection, loginId: string): Promise<Actor | null> {
  if (!/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i.test(loginId)) return null;
  const [row] = await db
    .select({
      personId: person.id,
      loginId: login.id,
      login: person.login,
      name: person.name,
      role: person.role,
      admin: person.admin,
      active: person.active,
    })
    .from(login)
    .innerJoin(person, eq(person.id, login.personId))
    .where(
      and(
        eq(login.id, loginId),
        isNull(login.endedAt),
        eq(person.active, true),
        sql`${login.seenAt} > motebook_now() - make_interval(mins => ${LOGIN_IDLE_MINUTES})`,
        sql`${login.startedAt} > motebook_now() - make_interval(hours => ${LOGIN_TOTAL_HOURS})`,
      ),
    );
  return row ?? null;
}
