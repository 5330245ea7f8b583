import { randomBytes } from 'node:crypto';
import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, expect, test } from 'vitest';
import { startLogin } from '../../../../db/commands/login/start-login';
import { askReset } from '../../../../db/commands/person/ask-reset';
import { invitePerson } from '../../../../db/commands/person/invite-person';
import { deactivatePerson } from '../../../../db/commands/person/manage-person';
import { sendLink } from '../../../../db/commands/person/send-link';
import { setPassword } from '../../../../db/commands/person/set-password';
import { AppError } from '../../../../db/errors';
import { inviteInput, setPasswordInput } from '../../../../db/inputs/person';
import { deliver, type OutgoingMail } from '../../../../db/mail/deliver';
import type { Actor } from '../../../../db/policies/may';
import { findActor } from '../../../../db/queries/login/find-actor';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import { makeLab, makePerson } from '../../../helpers/factories';

const PASSWORD = 'slow brown motes in water';
let database: TestDatabase;
let admin: Actor;
let address: string;
let running = 0;
beforeAll(async () => {
  database = await createTestDatabase();
  await makeLab(database.app);
  admin = await makePerson(database.app, { admin: true });
});
afterAll(() => database.drop());
beforeEach(() => {
  address = `192.0.2.${(running += 1)}`;
});

async function invited() {
  const login = `new${(running += 1)}`;
  const input = inviteInput.parse({
    ...{ login, email: `${login}@lab.example`, name: 'Somebody New', role: 'researcher' },
  });
  const { personId } = await invitePerson(database.app, admin, input);
  return { personId, login };
}

/** Sends what waits in the outbox. @returns the letters. */
async function sendAll(): Promise<OutgoingMail[]> {
  const { rows } = await database.app.execute<{ id: string }>(
    sql`SELECT id FROM mail WHERE sent_at IS NULL AND dropped_at IS NULL ORDER BY queued_at`,
  );
  const sent: OutgoingMail[] = [];
  for (const { id } of rows)
    await deliver(database.app, async (one) => void sent.push(one), 'http://127.0.0.1:4999', id);
  return sent;
}

const secretOf = (letters: readonly OutgoingMail[]) => /#(\S+)/.exec(letters.at(-1)?.text ?? '')?.[1] ?? '';
const use = (secret: string, password = PASSWORD) =>
  setPassword(database.app, setPasswordInput.parse({ secret, password }), address);
const signIn = (name: string, password = PASSWORD) =>
  startLogin(database.app, { name, password, userAgent: '' });
const codeOf = (run: Promise<unknown>) =>
  run.then(
    () => 'done',
    (error: unknown) => (error instanceof AppError ? error.code : error),
  );

test('the link of an invitation sets the password once, and signs nobody in by itself', async () => {
  const { login } = await invited();
  const secret = secretOf(await sendAll());
  // At least 128 bits: here 32 random bytes in base64url.
  expect(secret).toMatch(/^[A-Za-z0-9_-]{43}$/);
  expect(await use(secret)).toEqual({ login });
  expect(await signIn(login)).not.toBeNull();
  expect(await codeOf(use(secret, 'another row of plain words'))).toBe('not-found');
  expect(await signIn(login)).not.toBeNull();
});

test('of two who use a link at the same moment, one gets in', async () => {
  await invited();
  const secret = secretOf(await sendAll());
  const codes = await Promise.all([codeOf(use(secret)), codeOf(use(secret, 'another row of plain words'))]);
  expect(codes.sort()).toEqual(['done', 'not-found']);
});

test.each([
  ['reset', 30 * 60],
  ['invitation', 7 * 24 * 3600],
] as const)('the link of a %s works for %d seconds and not longer', async (kind, seconds) => {
  const { personId } = await invited();
  if (kind === 'reset') {
    const first = secretOf(await sendAll());
    await use(first);
    await sendLink(database.app, admin, personId);
  }
  const secret = secretOf(await sendAll());
  const { rows } = await database.app.execute<{ seconds: number }>(sql`
    SELECT extract(epoch FROM expires_at - made_at)::int AS seconds FROM password_link
    WHERE person_id = ${personId} AND ended_at IS NULL`);
  expect(rows).toEqual([{ seconds }]);
  // The link ages; the role app could not do that.
  await database.owner.execute(sql`
    UPDATE password_link SET expires_at = motebook_now() WHERE person_id = ${personId} AND ended_at IS NULL`);
  expect(await codeOf(use(secret, 'another row of plain words'))).toBe('not-found');
});

test('a newer link ends the older one (S09)', async () => {
  const { personId, login } = await invited();
  const older = secretOf(await sendAll());
  await sendLink(database.app, admin, personId);
  const newer = secretOf(await sendAll());
  expect(newer).not.toBe(older);
  expect(await codeOf(use(older))).toBe('not-found');
  expect(await use(newer)).toEqual({ login });
});

test('a closed account has no link that works, and gets no mail', async () => {
  const { personId, login } = await invited();
  const secret = secretOf(await sendAll());
  await deactivatePerson(database.app, admin, { personId, reason: '' });
  expect(await codeOf(use(secret))).toBe('not-found');
  await askReset(database.app, login, address);
  expect(await sendAll()).toEqual([]);
});

test('a secret that was never made, or is cut short, opens nothing', async () => {
  expect(await codeOf(use(randomBytes(32).toString('base64url')))).toBe('not-found');
  for (const secret of ['', 'short', `${'a'.repeat(42)}!`, 'a'.repeat(44)])
    expect(setPasswordInput.safeParse({ secret, password: PASSWORD }).success).toBe(false);
});

test('a reset ends every login, tells by mail, and forgets wrong passwords', async () => {
  const { personId, login } = await invited();
  await use(secretOf(await sendAll()));
  const started = await signIn(login);
  await askReset(database.app, `${login}@lab.example`, address);
  const letters = await sendAll();
  expect(letters.map((one) => one.to.address)).toEqual([`${login}@lab.example`]);
  await use(secretOf(letters), 'another row of plain words');
  expect(await findActor(database.app, started?.loginId ?? '')).toBeNull();
  expect(await signIn(login)).toBeNull();
  expect(await signIn(login, 'another row of plain words')).not.toBeNull();
  expect((await sendAll()).map((one) => one.subject)).toEqual(['Your password for Motebook was changed']);
  const { rows } = await database.app.execute<{ kind: string; reason: string }>(
    sql`SELECT kind, reason FROM audit WHERE person_id = ${personId} AND kind = 'password.set' ORDER BY id`,
  );
  expect(rows.map((row) => row.reason)).toEqual(['invitation', 'reset']);
});

test('a password that would soon be guessed is refused beside the field, and the link still works', async () => {
  const { login } = await invited();
  const secret = secretOf(await sendAll());
  for (const password of ['correct horse battery staple', `${login} motebook test`, 'aaaaaaaaaaaaaaaaaaaa']) {
    const error: unknown = await use(secret, password).catch((thrown: unknown) => thrown);
    expect([password, error instanceof AppError && Object.keys(error.fields)]).toEqual([
      password,
      ['password'],
    ]);
  }
  expect(await use(secret)).toEqual({ login });
});
