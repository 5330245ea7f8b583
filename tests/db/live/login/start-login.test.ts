import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { hashPassword, startLogin } from '../../../../db/commands/login/start-login';
import { findActor } from '../../../../db/queries/login/find-actor';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import { makePerson } from '../../../helpers/factories';

const PASSWORD = 'slow brown motes in water';
let database: TestDatabase;
let passwordHash: string;
beforeAll(async () => {
  database = await createTestDatabase();
  passwordHash = await hashPassword(PASSWORD);
  await makePerson(database.app, { login: 'sigrun', passwordHash });
});
afterAll(() => database.drop());

const start = (name: string, password = PASSWORD) =>
  startLogin(database.app, { name, password, userAgent: 'test' });

async function lastAudit(): Promise<unknown> {
  const { rows } = await database.app.execute(
    sql`SELECT kind, subject, person_id IS NOT NULL AS known FROM audit ORDER BY id DESC LIMIT 1`,
  );
  return rows[0];
}

test.each(['sigrun', 'SIGRUN', ' sigrun ', 'sigrun@lab.example', 'Sigrun@Lab.Example'])(
  'signs in %j with the right password',
  async (name) => {
    const started = await start(name);
    expect(await findActor(database.app, started?.loginId ?? '')).toMatchObject({ login: 'sigrun' });
    expect(await lastAudit()).toEqual({ kind: 'login.start', subject: '', known: true });
  },
);

test('a wrong password and an unknown name get the same answer, and both are noted', async () => {
  expect(await start('sigrun', 'slow brown motes in wine')).toBeNull();
  expect(await lastAudit()).toEqual({ kind: 'login.failed', subject: 'sigrun', known: true });
  expect(await start('nobody')).toBeNull();
  expect(await lastAudit()).toEqual({ kind: 'login.failed', subject: 'nobody', known: false });
  expect(await start('sigrun', '')).toBeNull();
});

test('a closed account cannot sign in with the right password', async () => {
  const closed = await makePerson(database.app, { passwordHash, active: false });
  expect(await start(closed.login)).toBeNull();
  expect(await lastAudit()).toEqual({ kind: 'login.failed', subject: closed.login, known: true });
});

test('every character of a long password counts, to the last and in any script', async () => {
  const long = `${'λ'.repeat(300)}end`;
  const { login } = await makePerson(database.app, { passwordHash: await hashPassword(long) });
  expect(await start(login, long)).not.toBeNull();
  expect(await start(login, long.slice(0, -1))).toBeNull();
  expect(await start(login, `${'λ'.repeat(300)}enD`)).toBeNull();
  expect(await start(login, long.slice(0, 72))).toBeNull();
});

test('the stored hash is argon2id with at least the parameters of the guidance, and salted', async () => {
  // OWASP Password Storage Cheat Sheet: argon2id with m = 47104 (46 MiB), t = 1, p = 1.
  expect(passwordHash).toMatch(/^\$argon2id\$v=19\$m=47104,t=1,p=1\$[A-Za-z0-9+/]{22,}\$[A-Za-z0-9+/]{43}$/);
  expect(await hashPassword(PASSWORD)).not.toBe(passwordHash);
});
