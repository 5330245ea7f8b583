import { spawnSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { startLogin } from '../../../../db/commands/login/start-login';
import { addPerson } from '../../../../db/commands/person/add-person';
import { AppError } from '../../../../db/errors';
import { addPersonInput, type AddPersonInput } from '../../../../db/inputs/person';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';

const PROJECT = path.resolve(import.meta.dirname, '../../../..');
const GROUP = { name: 'Lakeside Optics', timeZone: 'Europe/Oslo' };
const MIRA: AddPersonInput = {
  login: 'mira',
  email: 'mira@lab.example',
  name: 'Mira Olsdal',
  role: 'pi',
  admin: true,
  password: 'a row of five plain words',
};

let database: TestDatabase;
beforeAll(async () => {
  database = await createTestDatabase();
});
afterAll(() => database.drop());

test('the first account sets up the group; it can sign in, and the audit says where it came from', async () => {
  const { personId } = await addPerson(database.app, MIRA, GROUP);
  const started = await startLogin(database.app, { name: 'mira', password: MIRA.password, userAgent: '' });
  expect(started?.personId).toBe(personId);
  const { rows: labs } = await database.app.execute(sql`SELECT name, time_zone FROM lab`);
  expect(labs).toEqual([{ name: 'Lakeside Optics', time_zone: 'Europe/Oslo' }]);
  const { rows } = await database.app.execute<{ after: unknown }>(
    sql`SELECT subject, after, reason FROM audit WHERE kind = 'person.create'`,
  );
  expect(rows).toHaveLength(1);
  expect(rows[0]).toMatchObject({ subject: 'mira', after: { login: 'mira', role: 'pi', admin: true } });
  expect(JSON.stringify(rows)).not.toMatch(/argon2|plain words/);
});

test('a login name or an address that somebody has is refused by field, and nothing is made', async () => {
  const refusal = async (change: Partial<AddPersonInput>) => {
    const error: unknown = await addPerson(database.app, { ...MIRA, ...change }, GROUP).catch(
      (thrown: unknown) => thrown,
    );
    return error instanceof AppError ? Object.keys(error.fields) : error;
  };
  expect(await refusal({ email: 'other@lab.example' })).toEqual(['login']);
  expect(await refusal({ login: 'other' })).toEqual(['email']);
  const { rows } = await database.app.execute(sql`SELECT 1 FROM person`);
  expect(rows).toHaveLength(1);
});

test('a second account leaves the group as it is', async () => {
  await addPerson(
    database.app,
    { ...MIRA, login: 'tor', email: 'tor@lab.example' },
    { ...GROUP, name: 'Another' },
  );
  const { rows } = await database.app.execute(sql`SELECT name FROM lab`);
  expect(rows).toEqual([{ name: 'Lakeside Optics' }]);
});

test('input is folded to one form, and what cannot be right is named', () => {
  const parse = (change: Record<string, unknown>) => addPersonInput.safeParse({ ...MIRA, ...change });
  expect(
    parse({ login: ' Mira.O ', email: ' Ｍira@Lab.Example. ', name: ' Mira\u00a0O ' }).data,
  ).toMatchObject({
    login: 'mira.o',
    email: 'mira@lab.example',
    name: 'Mira\u00a0O',
  });
  const wrong: [string, unknown][] = [
    ['login', 'mira@lab.example'],
    ['login', 'm'],
    ['email', 'mira'],
    ['name', ' '],
    ['name', 'Mira\u202eO'],
    ['role', 'boss'],
    // NIST SP 800-63B-4, 3.1.1: at least 15 characters where the password is the only factor.
    ['password', 'x'.repeat(14)],
  ];
  for (const [field, value] of wrong) {
    expect(
      parse({ [field]: value }).error?.issues.map((issue) => issue.path[0]),
      field,
    ).toEqual([field]);
  }
  expect(parse({ password: 'x'.repeat(15) }).success).toBe(true);
});

test('the command takes the password from standard input and never as an option', () => {
  const folder = mkdtempSync(path.join(tmpdir(), 'motebook-add-'));
  try {
    const data = path.join(folder, 'data');
    mkdirSync(data);
    const secrets = { databasePasswords: inject('databasePasswords') };
    writeFileSync(path.join(data, 'secrets.json'), JSON.stringify(secrets), { mode: 0o600 });
    const run = (args: string[], input: string, environment: Record<string, string>) => {
      const command = ['--import', 'tsx', 'scripts/add-person.ts', ...args];
      return spawnSync(process.execPath, command, {
        ...{ cwd: PROJECT, encoding: 'utf8', input },
        env: { ...process.env, ...environment },
      });
    };
    const person = ['--login', 'liv', '--email', 'liv@lab.example', '--name', 'Liv Aasen', '--role', 'guest'];
    const production = {
      MOTEBOOK_MODE: 'production',
      MOTEBOOK_DATABASE_APP: database.urls.motebook_app,
      MOTEBOOK_DATA: data,
    };
    const made = run(person, 'one long password, typed once\n', production);
    expect(made.stderr).toBe('');
    expect(made.stdout).toBe('Liv Aasen can now sign in as liv or liv@lab.example.\n');
    expect(made.status).toBe(0);
    const again = run(person, 'one long password, typed once\n', production);
    expect(again.stderr).toMatch(/Somebody has the login name liv/);
    expect(again.status).toBe(1);
    const short = run(person, 'short\n', production);
    expect(short.stderr).toMatch(/Password: .*15 characters/);
    expect(short.status).toBe(2);
    expect(run([...person, '--password', 'x'.repeat(20)], '', production).status).toBe(2);
    // Without production the address comes from the data folder; nobody listens on this port.
    const closed = run(person, 'one long password, typed once\n', {
      MOTEBOOK_DATA: data,
      MOTEBOOK_DB_PORT: '1024',
    });
    expect(closed.stderr).toMatch(/npm start/);
    expect(closed.status).toBe(1);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
});
