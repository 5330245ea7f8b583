import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { connect, type Database } from '../../../db/client';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { makePerson } from '../../helpers/factories';

let database: TestDatabase;
let reader: Database;
beforeAll(async () => {
  database = await createTestDatabase();
  reader = connect(database.urls.motebook_read, { max: 1, name: 'test-read' });
  await makePerson(database.app);
});
afterAll(async () => {
  await reader.$client.end();
  await database.drop();
});

/** Every right beyond SELECT that a role other than the owner holds on a table, as "table: VERB". Nothing else may appear. */
const WRITES: Readonly<Record<string, readonly string[]>> = {
  motebook_app: [
    'attachment: INSERT',
    'attempt: DELETE',
    'attempt: INSERT',
    'attempt: UPDATE',
    'audit: INSERT',
    'block_result: DELETE',
    'block_result: INSERT',
    'block_result: UPDATE',
    'entry_text: INSERT',
    'entry_text: UPDATE',
    'lab: INSERT',
    'lab: UPDATE',
    'login: INSERT',
    'mail: INSERT',
    'notebook: INSERT',
    'notebook: UPDATE',
    'notebook_member: DELETE',
    'notebook_member: INSERT',
    'notebook_member: UPDATE',
    'password_link: INSERT',
    'person: INSERT',
    'reading: INSERT',
    'result: INSERT',
    'upload_ticket: INSERT',
    'upload_ticket: UPDATE',
  ],
  motebook_ws: [],
  motebook_read: [],
  motebook_backup: [],
};

/** The same for single columns, where not the whole table is meant. */
const COLUMN_WRITES: Readonly<Record<string, readonly string[]>> = {
  motebook_app: [
    'entry INSERT: created_by, experiment_date, id, notebook_id, number, title',
    'entry UPDATE: experiment_date, title',
    'login UPDATE: ended_at, seen_at',
    'mail UPDATE: dropped_at, handed_at, last_fault, person_id, sent_at, tries',
    'password_link UPDATE: ended_at',
    'person UPDATE: active, admin, email, name, password_hash, role',
  ],
  motebook_ws: [],
  motebook_read: [],
  motebook_backup: [],
};

const FUNCTIONS: Readonly<Record<string, readonly string[]>> = {
  motebook_app: ['append_updates', 'motebook_now', 'register_client', 'save_snapshot', 'update_chain'],
  motebook_ws: ['append_updates', 'motebook_now', 'register_client', 'update_chain'],
  motebook_read: ['motebook_now', 'update_chain'],
  motebook_backup: [],
};

/** `acl.privilege_type` for everybody to whom something was granted, PUBLIC included (grantee 0). */
const grantee = sql.raw(`CASE a.grantee WHEN 0 THEN 'PUBLIC' ELSE a.grantee::regrole::text END`);
const others = sql.raw(`a.grantee <> c.relowner`);

test.each(Object.keys(WRITES))('%s may write no other table than listed', async (role) => {
  const { rows } = await database.owner.execute<{ line: string }>(sql`
    SELECT c.relname || ': ' || a.privilege_type AS line
    FROM pg_class c CROSS JOIN aclexplode(c.relacl) a
    WHERE c.relnamespace = 'public'::regnamespace AND ${others} AND ${grantee} IN (${role}, 'PUBLIC')
      AND a.privilege_type <> 'SELECT' ORDER BY line`);
  expect(rows.map((row) => row.line)).toEqual(WRITES[role]);
});

test.each(Object.keys(COLUMN_WRITES))('%s may write no other column than listed', async (role) => {
  const { rows } = await database.owner.execute<{ line: string }>(sql`
    SELECT c.relname || ' ' || a.privilege_type || ': ' || string_agg(t.attname, ', ' ORDER BY t.attname) AS line
    FROM pg_attribute t JOIN pg_class c ON c.oid = t.attrelid CROSS JOIN aclexplode(t.attacl) a
    WHERE c.relnamespace = 'public'::regnamespace AND ${others} AND ${grantee} IN (${role}, 'PUBLIC')
      AND a.privilege_type <> 'SELECT' GROUP BY c.relname, a.privilege_type ORDER BY line`);
  expect(rows.map((row) => row.line)).toEqual(COLUMN_WRITES[role]);
});

test.each(Object.keys(FUNCTIONS))('%s may call no other function than listed', async (role) => {
  const { rows } = await database.owner.execute<{ name: string }>(sql`
    SELECT p.proname AS name FROM pg_proc p
    WHERE p.pronamespace = 'public'::regnamespace AND has_function_privilege(${role}, p.oid, 'EXECUTE') ORDER BY name`);
  expect(rows.map((row) => row.name)).toEqual(FUNCTIONS[role]);
});

test('a function of a later migration can be called by nobody until it is granted', async () => {
  await database.owner.execute(sql`CREATE FUNCTION later() RETURNS int LANGUAGE sql AS 'SELECT 1'`);
  await expect(database.app.$client.query('SELECT later()')).rejects.toThrow(/permission denied/);
  await database.owner.execute(sql`DROP FUNCTION later()`);
});

test('every function that runs with the owner’s rights pins where it finds its names', async () => {
  const { rows } = await database.owner.execute<{ name: string; settings: string[] | null }>(sql`
    SELECT proname AS name, proconfig AS settings FROM pg_proc
    WHERE pronamespace = 'public'::regnamespace AND prosecdef ORDER BY name`);
  expect(rows.map((row) => row.name)).toEqual([
    'append_updates',
    'motebook_now',
    'register_client',
    'save_snapshot',
  ]);
  for (const row of rows) expect(row.settings, row.name).toEqual(['search_path=public, pg_temp']);
});

test('neither ws nor read ever sees a password hash', async () => {
  for (const db of [database.ws, reader]) {
    await expect(db.$client.query('SELECT password_hash FROM person')).rejects.toThrow(/permission denied/);
    await expect(db.$client.query('SELECT * FROM person')).rejects.toThrow(/permission denied/);
    expect((await db.$client.query('SELECT name FROM person')).rowCount).toBe(1);
  }
  await expect(reader.$client.query('SELECT * FROM login')).rejects.toThrow(/permission denied/);
});

test('only the owner shifts the clock or makes tables, and no role is a superuser', async () => {
  for (const db of [database.app, database.ws, reader]) {
    await expect(db.$client.query(`INSERT INTO clock_offset (shift) VALUES ('1 day')`)).rejects.toThrow(
      /permission/,
    );
    await expect(db.$client.query('CREATE TABLE mine (a int)')).rejects.toThrow(/permission denied/);
  }
  const { rows } = await database.owner.execute(sql`
    SELECT rolname FROM pg_roles
    WHERE rolname LIKE 'motebook\\_%' AND (rolsuper OR rolcreaterole OR rolbypassrls OR rolreplication)`);
  expect(rows).toEqual([]);
});

test('a login name cannot change, look like an address or come in capitals; an address is stored in small letters', async () => {
  await expect(database.app.$client.query(`UPDATE person SET login = 'other'`)).rejects.toThrow(
    /permission denied/,
  );
  const insert = `INSERT INTO person (login, email, name, role, password_hash) VALUES ($1, $2, 'N', 'guest', 'h')`;
  for (const login of ['mira@lab.example', 'Mira', '', '7even', 'x'.repeat(41)]) {
    await expect(database.app.$client.query(insert, [login, 'm@lab.example']), login).rejects.toThrow(
      /person_login_form/,
    );
  }
  for (const email of ['Mira@lab.example', 'nobody', 'a b@lab.example']) {
    await expect(database.app.$client.query(insert, ['mira', email]), email).rejects.toThrow(
      /person_email_form/,
    );
  }
});
