import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { startLogin } from '../../../../db/commands/login/start-login';
import { invitePerson } from '../../../../db/commands/person/invite-person';
import { sendLink } from '../../../../db/commands/person/send-link';
import { AppError } from '../../../../db/errors';
import { inviteInput, type InviteInput } from '../../../../db/inputs/person';
import type { Actor } from '../../../../db/policies/may';
import { getPerson } from '../../../../db/queries/person/get-person';
import { listPeople } from '../../../../db/queries/person/list-people';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import { makeLab, makeNotebook, makePerson } from '../../../helpers/factories';

let database: TestDatabase;
let admin: Actor;
let pi: Actor;
let researcher: Actor;
let own: string;
let foreign: string;
beforeAll(async () => {
  database = await createTestDatabase();
  await makeLab(database.app);
  admin = await makePerson(database.app, { admin: true });
  pi = await makePerson(database.app, { role: 'pi' });
  researcher = await makePerson(database.app);
  own = (await makeNotebook(database.app, pi)).id;
  foreign = (await makeNotebook(database.app, researcher)).id;
});
afterAll(() => database.drop());

let running = 0;
function input(change: Partial<InviteInput> = {}): InviteInput {
  const login = `guest${(running += 1)}`;
  return inviteInput.parse({
    ...{ login, email: `${login}@lab.example`, name: 'Somebody New', role: 'researcher' },
    ...change,
  });
}

/** What was refused: the fields, or the code when it concerns no field. */
async function refusal(run: Promise<unknown>): Promise<unknown> {
  const error: unknown = await run.then(
    () => 'it went through',
    (thrown: unknown) => thrown,
  );
  if (!(error instanceof AppError)) return error;
  const fields = Object.keys(error.fields);
  return fields.length > 0 ? fields : error.code;
}

const count = async (query: ReturnType<typeof sql>) => (await database.app.execute(query)).rows.length;

test('an invitation makes an account that nobody can sign in to, a letter in the outbox and an audit row', async () => {
  const given = input();
  const { personId } = await invitePerson(database.app, admin, given);
  for (const password of ['', 'nobody has this password', 'x'.repeat(20)]) {
    const started = await startLogin(database.app, { name: given.login, password, userAgent: '' });
    expect(started).toBeNull();
  }
  const { rows } = await database.app.execute(
    sql`SELECT kind, details, sent_at FROM mail WHERE person_id = ${personId}`,
  );
  expect(rows).toEqual([{ kind: 'invitation', details: { inviter: admin.name }, sent_at: null }]);
  const audit = await database.app.execute(
    sql`SELECT person_id, login_id, reason, after->>'role' AS role FROM audit WHERE kind = 'person.create' AND subject = ${given.login}`,
  );
  expect(audit.rows).toEqual([
    { person_id: admin.personId, login_id: admin.loginId, reason: 'invited', role: 'researcher' },
  ]);
});

test('a PI invites researchers and guests to a notebook of their own, and to nothing else', async () => {
  const { personId } = await invitePerson(database.app, pi, input({ notebookId: own, memberRole: 'editor' }));
  expect(
    await count(
      sql`SELECT 1 FROM notebook_member WHERE notebook_id = ${own} AND person_id = ${personId} AND role = 'editor'`,
    ),
  ).toBe(1);
  const before = await count(sql`SELECT 1 FROM person`);
  for (const change of [
    { notebookId: null },
    { notebookId: foreign },
    { notebookId: '00000000-0000-4000-8000-000000000000' },
    { notebookId: own, role: 'pi' as const },
    { notebookId: own, admin: true },
  ]) {
    expect([change, await refusal(invitePerson(database.app, pi, input(change)))]).toEqual([
      change,
      'forbidden',
    ]);
  }
  expect(await count(sql`SELECT 1 FROM person`)).toBe(before);
});

test('a researcher, a guest and a closed account invite nobody; an administrator not into a notebook of others', async () => {
  const guest = await makePerson(database.app, { role: 'guest' });
  const closed = { ...admin, active: false };
  for (const actor of [researcher, guest, closed])
    expect(await refusal(invitePerson(database.app, actor, input()))).toBe('forbidden');
  expect(await refusal(invitePerson(database.app, researcher, input({ notebookId: foreign })))).toBe(
    'forbidden',
  );
  expect(await refusal(invitePerson(database.app, admin, input({ notebookId: own })))).toBe('forbidden');
});

test('a taken name or address, and roles that do not fit, are refused beside their field', async () => {
  const taken = input();
  await invitePerson(database.app, admin, taken);
  expect(await refusal(invitePerson(database.app, admin, input({ login: taken.login })))).toEqual(['login']);
  expect(await refusal(invitePerson(database.app, admin, input({ email: taken.email })))).toEqual(['email']);
  expect(await refusal(invitePerson(database.app, admin, input({ role: 'guest', admin: true })))).toEqual([
    'admin',
  ]);
  const writingGuest = input({ role: 'guest', notebookId: own, memberRole: 'editor' });
  expect(await refusal(invitePerson(database.app, pi, writingGuest))).toEqual(['memberRole']);
});

test('a link is sent again by administrators; by a PI only to the invited of their notebooks', async () => {
  const mine = (await invitePerson(database.app, pi, input({ notebookId: own }))).personId;
  const other = (await invitePerson(database.app, admin, input())).personId;
  await sendLink(database.app, pi, mine);
  await sendLink(database.app, admin, other);
  await sendLink(database.app, admin, researcher.personId);
  expect(await refusal(sendLink(database.app, pi, other))).toBe('forbidden');
  expect(await refusal(sendLink(database.app, pi, researcher.personId))).toBe('forbidden');
  expect(await refusal(sendLink(database.app, researcher, mine))).toBe('forbidden');
  expect(await refusal(sendLink(database.app, admin, '00000000-0000-4000-8000-000000000000'))).toBe(
    'not-found',
  );
  const closed = await makePerson(database.app, { active: false });
  expect(await refusal(sendLink(database.app, admin, closed.personId))).toBe('conflict');
  const { rows } = await database.app.execute(
    sql`SELECT kind FROM mail WHERE person_id = ${researcher.personId}`,
  );
  expect(rows).toEqual([{ kind: 'reset' }]);
});

test('PIs and administrators see the people, never a hash; for everybody else the list is not there', async () => {
  const seen = await listPeople(database.app, pi);
  expect(seen.find((one) => one.id === researcher.personId)).toMatchObject({
    ...{ login: researcher.login, active: true, invited: false, notebooksOwned: 1 },
  });
  expect(seen.find((one) => one.id === researcher.personId)?.lastSeenAt).toBeInstanceOf(Date);
  expect(seen.some((one) => one.invited)).toBe(true);
  expect(JSON.stringify(seen)).not.toContain('argon2');
  expect(await refusal(listPeople(database.app, researcher))).toBe('not-found');
  expect(await refusal(getPerson(database.app, researcher, pi.personId))).toBe('not-found');
  const page = await getPerson(database.app, admin, researcher.personId);
  expect(page.logins).toHaveLength(1);
  expect(page.notebooks.map((one) => one.role)).toEqual(['owner']);
  expect((await getPerson(database.app, pi, researcher.personId)).logins).toEqual([]);
});
