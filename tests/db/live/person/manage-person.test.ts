import { sql } from 'drizzle-orm';
import type WebSocket from 'ws';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { endOtherLogin, endOtherLogins } from '../../../../db/commands/login/end-other-login';
import { hashPassword, startLogin } from '../../../../db/commands/login/start-login';
import { seedEntry } from '../../../../db/commands/entry/write-document';
import { changeEmail, changeName, changePassword } from '../../../../db/commands/person/change-own';
import {
  changeRole,
  deactivatePerson,
  handOver,
  reactivatePerson,
} from '../../../../db/commands/person/manage-person';
import { AppError } from '../../../../db/errors';
import type { Actor } from '../../../../db/policies/may';
import { findActor } from '../../../../db/queries/login/find-actor';
import { startServer, type RunningServer } from '../../../../ws-server/server';
import { makeClient, PUBLIC_URL, SECRET, until } from '../../../helpers/collab-clients';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import {
  makeEntry,
  makeLab,
  makeLogin,
  makeMember,
  makeNotebook,
  makePerson,
} from '../../../helpers/factories';

const PASSWORD = 'slow brown motes in water';
const NEW = 'another row of plain words';
const NOBODY = '00000000-0000-4000-8000-000000000000';
let database: TestDatabase;
let server: RunningServer;
let admin: Actor;
let passwordHash: string;
beforeAll(async () => {
  database = await createTestDatabase();
  await makeLab(database.app);
  passwordHash = await hashPassword(PASSWORD);
  admin = await makePerson(database.app, { admin: true, passwordHash });
  server = await startServer({
    port: 0,
    databaseUrl: database.urls.motebook_ws,
    publicUrl: PUBLIC_URL,
    secret: SECRET,
  });
});
afterAll(async () => {
  await server.stop();
  await database.drop();
});

async function refusal(run: Promise<unknown>): Promise<unknown> {
  const error: unknown = await run.then(
    () => 'it went through',
    (thrown: unknown) => thrown,
  );
  if (!(error instanceof AppError)) return error;
  const fields = Object.keys(error.fields);
  return fields.length > 0 ? fields : error.code;
}

async function lastAudit(kind: string) {
  const { rows } = await database.app.execute<{ person_id: string; subject: string; after: unknown }>(
    sql`SELECT person_id, subject, before, after, reason FROM audit WHERE kind = ${kind} ORDER BY id DESC LIMIT 1`,
  );
  return rows[0];
}

/** An entry that somebody may write, and their open, joined page. */
async function openPageOf(actor: Actor) {
  const notebook = await makeNotebook(database.app, admin);
  await makeMember(database.app, notebook.id, actor, 'editor');
  const entryId = await makeEntry(database.app, notebook.id, admin);
  await database.app.transaction((tx) => seedEntry(tx, { entryId, actor: admin }));
  const client = await makeClient(server.port, entryId, actor);
  await until('the page has joined', () => client.provider.synced);
  return client;
}

test('closing an account ends its logins, and its open sockets within two seconds', async () => {
  const leaver = await makePerson(database.app);
  const client = await openPageOf(leaver);
  try {
    const socket = client.provider.ws as unknown as WebSocket;
    await deactivatePerson(database.app, admin, { personId: leaver.personId, reason: 'left the group' });
    // Integrity rule 2.10: logins and sockets end within 2 s.
    await until('the socket is closed', () => client.closes.length > 0 && socket.readyState !== 1, 2);
    expect(client.closes.length).toBeGreaterThan(0);
  } finally {
    client.destroy();
  }
  expect(await findActor(database.app, leaver.loginId)).toBeNull();
  const { rows } = await database.app.execute(
    sql`SELECT ended_at IS NOT NULL AS ended, p.name FROM login JOIN person p ON p.id = person_id WHERE person_id = ${leaver.personId}`,
  );
  expect(rows).toEqual([{ ended: true, name: leaver.name }]);
  expect(await lastAudit('person.close')).toMatchObject({
    ...{ person_id: admin.personId, subject: leaver.login, reason: 'left the group' },
    after: { active: false, loginsEnded: 1 },
  });
  await reactivatePerson(database.app, admin, leaver.personId);
  // The account is open again; the login that was ended stays ended.
  expect(await findActor(database.app, leaver.loginId)).toBeNull();
  expect(await findActor(database.app, await makeLogin(database.app, leaver.personId))).not.toBeNull();
});

test('only an administrator closes, opens, changes roles and hands over; nobody who is unknown is touched', async () => {
  const pi = await makePerson(database.app, { role: 'pi' });
  const target = await makePerson(database.app);
  const { personId } = target;
  for (const actor of [pi, target, { ...admin, active: false }]) {
    const tries = [
      deactivatePerson(database.app, actor, { personId, reason: '' }),
      reactivatePerson(database.app, actor, personId),
      changeRole(database.app, actor, { personId, role: 'pi', admin: true }),
      handOver(database.app, actor, { personId, toPersonId: pi.personId }),
    ];
    for (const one of tries) expect(await refusal(one)).toBe('forbidden');
  }
  expect(await refusal(deactivatePerson(database.app, admin, { personId: NOBODY, reason: '' }))).toBe(
    'not-found',
  );
  expect(await refusal(changeRole(database.app, admin, { personId: NOBODY, role: 'pi', admin: false }))).toBe(
    'not-found',
  );
});

test('there is always an administrator: not oneself, not the last one, also when two try at once', async () => {
  const self = { personId: admin.personId, reason: '' };
  expect(await refusal(deactivatePerson(database.app, admin, self))).toBe('conflict');
  const drop = (actor: Actor, whom: Actor) =>
    changeRole(database.app, actor, { personId: whom.personId, role: 'researcher', admin: false });
  expect(await refusal(drop(admin, admin))).toBe('conflict');
  const second = await makePerson(database.app, { admin: true, passwordHash });
  const outcomes = await Promise.all([refusal(drop(admin, second)), refusal(drop(second, admin))]);
  expect(outcomes.sort()).toEqual(['conflict', 'it went through']);
  const { rows } = await database.app.execute(sql`SELECT id FROM person WHERE admin AND active`);
  expect(rows).toHaveLength(1);
  await database.app.execute(sql`UPDATE person SET admin = (id = ${admin.personId})`);
});

test('a role changes with its audit row, and takes effect on the next request', async () => {
  const who = await makePerson(database.app);
  await changeRole(database.app, admin, { personId: who.personId, role: 'pi', admin: false });
  expect(await findActor(database.app, who.loginId)).toMatchObject({ role: 'pi', admin: false });
  expect(await lastAudit('person.role')).toMatchObject({
    ...{ subject: who.login, before: { role: 'researcher', admin: false } },
    after: { role: 'pi', admin: false },
  });
  const guest = { personId: who.personId, role: 'guest', admin: true } as const;
  expect(await refusal(changeRole(database.app, admin, guest))).toEqual(['admin']);
});

test('a leaver’s notebooks get a new owner, each with an audit row; other memberships stay', async () => {
  const leaver = await makePerson(database.app);
  const heir = await makePerson(database.app);
  const first = await makeNotebook(database.app, leaver, { members: [[heir, 'reader']] });
  const second = await makeNotebook(database.app, leaver);
  const third = await makeNotebook(database.app, admin, { members: [[leaver, 'editor']] });
  await deactivatePerson(database.app, admin, { personId: leaver.personId, reason: '' });
  const input = { personId: leaver.personId, toPersonId: heir.personId };
  expect(await handOver(database.app, admin, input)).toEqual({ notebooks: 2 });
  const { rows } = await database.app.execute<{ notebook_id: string; person_id: string; role: string }>(
    sql`SELECT notebook_id, person_id, role FROM notebook_member WHERE person_id IN (${leaver.personId}, ${heir.personId})`,
  );
  const roles = (notebookId: string) =>
    rows
      .filter((row) => row.notebook_id === notebookId)
      .map((row) => `${row.person_id === heir.personId ? 'heir' : 'leaver'} ${row.role}`)
      .sort();
  expect(roles(first.id)).toEqual(['heir owner', 'leaver reader']);
  expect(roles(second.id)).toEqual(['heir owner', 'leaver reader']);
  expect(roles(third.id)).toEqual(['leaver editor']);
  expect(await lastAudit('notebook.hand-over')).toMatchObject({ after: { owner: heir.login } });
  expect(await handOver(database.app, admin, input)).toEqual({ notebooks: 0 });

  const guest = await makePerson(database.app, { role: 'guest' });
  for (const toPersonId of [leaver.personId, guest.personId, NOBODY]) {
    const given = { personId: heir.personId, toPersonId };
    expect(await refusal(handOver(database.app, admin, given))).toEqual(['toPersonId']);
  }
});

test('a login is ended by its owner or an administrator; to others it is not there (S18)', async () => {
  const owner = await makePerson(database.app);
  const other = await makePerson(database.app, { role: 'pi' });
  const second = await makeLogin(database.app, owner.personId);
  expect(await refusal(endOtherLogin(database.app, other, second))).toBe('not-found');
  expect(await refusal(endOtherLogin(database.app, owner, NOBODY))).toBe('not-found');
  const client = await openPageOf({ ...owner, loginId: second });
  try {
    await endOtherLogin(database.app, owner, second);
    await until('the socket of the ended login is closed', () => client.closes.length > 0, 2);
  } finally {
    client.destroy();
  }
  expect(await findActor(database.app, owner.loginId)).not.toBeNull();
  await endOtherLogin(database.app, admin, owner.loginId);
  expect(await findActor(database.app, owner.loginId)).toBeNull();
  expect(await lastAudit('login.end-other')).toMatchObject({ person_id: admin.personId });
});

test('all other logins end at once, the own one stays', async () => {
  const owner = await makePerson(database.app);
  const others = [
    await makeLogin(database.app, owner.personId),
    await makeLogin(database.app, owner.personId),
  ];
  expect(await endOtherLogins(database.app, owner)).toEqual({ ended: 2 });
  for (const id of others) expect(await findActor(database.app, id)).toBeNull();
  expect(await findActor(database.app, owner.loginId)).not.toBeNull();
});

test('the password is changed only with the present one; other logins end, and a mail tells (S05, S12)', async () => {
  const owner = await makePerson(database.app, { passwordHash });
  const second = await makeLogin(database.app, owner.personId);
  const change = (current: string, password: string) =>
    changePassword(database.app, owner, { current, password });
  expect(await refusal(change('not this one at all', NEW))).toEqual(['current']);
  expect(await refusal(change(PASSWORD, 'qwertyuiopasdfghjkl'))).toEqual(['password']);
  expect(await findActor(database.app, second)).not.toBeNull();
  await change(PASSWORD, NEW);
  expect(await findActor(database.app, second)).toBeNull();
  expect(await findActor(database.app, owner.loginId)).not.toBeNull();
  const signIn = (password: string) =>
    startLogin(database.app, { name: owner.login, password, userAgent: '' });
  expect(await signIn(PASSWORD)).toBeNull();
  expect(await signIn(NEW)).not.toBeNull();
  const { rows } = await database.app.execute(sql`SELECT kind FROM mail WHERE person_id = ${owner.personId}`);
  expect(rows).toEqual([{ kind: 'password-changed' }]);
});

test('wrong present passwords are counted as sign-in counts them', async () => {
  const owner = await makePerson(database.app, { passwordHash });
  const wrong = () => refusal(changePassword(database.app, owner, { current: 'wrong', password: NEW }));
  for (let i = 0; i < 5; i++) expect(await wrong()).toEqual(['current']);
  expect(await wrong()).toBe('slow-down');
});

test('an address is changed with the password, and both addresses are told (S12); one that is taken is refused', async () => {
  const owner = await makePerson(database.app, { passwordHash });
  const change = (email: string, current: string) => changeEmail(database.app, owner, { email, current });
  expect(await refusal(change('new@lab.example', 'wrong'))).toEqual(['current']);
  expect(await refusal(change(`${admin.login}@lab.example`, PASSWORD))).toEqual(['email']);
  await change('new@lab.example', PASSWORD);
  const { rows } = await database.app.execute<{ address: string }>(
    sql`SELECT address FROM mail WHERE person_id = ${owner.personId} AND kind = 'address-changed'`,
  );
  expect(rows.map((row) => row.address).sort()).toEqual(
    [`${owner.login}@lab.example`, 'new@lab.example'].sort(),
  );
  expect(await lastAudit('person.email')).toMatchObject({ after: { email: 'new@lab.example' } });
});

test('a name changes with its audit row; the login name cannot be changed at all', async () => {
  const owner = await makePerson(database.app, { name: 'Before' });
  await changeName(database.app, owner, 'After');
  expect(await findActor(database.app, owner.loginId)).toMatchObject({ name: 'After', login: owner.login });
  expect(await lastAudit('person.name')).toMatchObject({
    before: { name: 'Before' },
    after: { name: 'After' },
  });
});
