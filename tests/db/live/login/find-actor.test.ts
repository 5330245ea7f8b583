import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { endLogin } from '../../../../db/commands/login/end-login';
import { touchLogin } from '../../../../db/commands/login/touch-login';
import { findActor } from '../../../../db/queries/login/find-actor';
import { LOGIN_IDLE_MINUTES, LOGIN_TOTAL_HOURS } from '../../../../db/session-cookie';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import { makePerson } from '../../../helpers/factories';

let database: TestDatabase;
beforeAll(async () => {
  database = await createTestDatabase();
});
afterAll(() => database.drop());

/** Moves the times of a login into the past, as only the owner can. */
async function age(loginId: string, given: { seenMinutes?: number; startedMinutes?: number }): Promise<void> {
  await database.owner.execute(sql`UPDATE login SET
    seen_at = motebook_now() - make_interval(mins => ${given.seenMinutes ?? 0}),
    started_at = motebook_now() - make_interval(mins => ${given.startedMinutes ?? 0}) WHERE id = ${loginId}`);
}

test('finds who is signed in, as the database knows them now', async () => {
  const actor = await makePerson(database.app, { role: 'pi', admin: true, name: 'Ada Brekke' });
  expect(await findActor(database.app, actor.loginId)).toEqual(actor);
  expect(await findActor(database.ws, actor.loginId)).toEqual(actor);
  await database.app.execute(
    sql`UPDATE person SET role = 'guest', admin = false WHERE id = ${actor.personId}`,
  );
  expect(await findActor(database.app, actor.loginId)).toEqual({ ...actor, role: 'guest', admin: false });
});

test('a login that has ended finds nobody, and the person’s other login still does', async () => {
  const actor = await makePerson(database.app);
  const other = await makePerson(database.app);
  await endLogin(database.app, actor.loginId);
  expect(await findActor(database.app, actor.loginId)).toBeNull();
  expect(await findActor(database.app, other.loginId)).not.toBeNull();
  await endLogin(database.app, actor.loginId);
  const { rows } = await database.app.execute(
    sql`SELECT 1 FROM audit WHERE kind = 'login.end' AND login_id = ${actor.loginId}`,
  );
  expect(rows).toHaveLength(1);
});

test('a closed account finds nobody', async () => {
  const actor = await makePerson(database.app);
  await database.app.execute(sql`UPDATE person SET active = false WHERE id = ${actor.personId}`);
  expect(await findActor(database.app, actor.loginId)).toBeNull();
});

test('a login is over after its idle time, and after its total time in any case', async () => {
  const { loginId } = await makePerson(database.app);
  await age(loginId, { seenMinutes: LOGIN_IDLE_MINUTES - 1 });
  expect(await findActor(database.app, loginId)).not.toBeNull();
  await age(loginId, { seenMinutes: LOGIN_IDLE_MINUTES + 1 });
  expect(await findActor(database.app, loginId)).toBeNull();
  await age(loginId, { startedMinutes: LOGIN_TOTAL_HOURS * 60 - 1 });
  expect(await findActor(database.app, loginId)).not.toBeNull();
  await age(loginId, { startedMinutes: LOGIN_TOTAL_HOURS * 60 + 1 });
  expect(await findActor(database.app, loginId)).toBeNull();
});

test('being at work keeps a login alive, and is noted once a minute at most', async () => {
  const { loginId } = await makePerson(database.app);
  const seen = async () =>
    (
      await database.app.execute<{ seen: string }>(
        sql`SELECT seen_at::text AS seen FROM login WHERE id = ${loginId}`,
      )
    ).rows[0]?.seen;
  const start = await seen();
  await touchLogin(database.app, loginId);
  expect(await seen()).toBe(start);
  await age(loginId, { seenMinutes: 2 });
  const before = await seen();
  await touchLogin(database.app, loginId);
  expect(await seen()).not.toBe(before);
});

test.each([
  '',
  'x',
  '------------------------------------',
  `${'0'.repeat(8)}-0000-0000-0000-${'0'.repeat(12)}`,
])('the id %j finds nobody and is no fault', async (id) =>
  expect(await findActor(database.app, id)).toBeNull(),
);
