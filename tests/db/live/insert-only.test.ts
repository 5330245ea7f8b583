import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Database } from '../../../db/client';
import { audit } from '../../../db/schema/index';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { makeAttachment, makeEntry, makeNotebook, makePerson } from '../../helpers/factories';

let database: TestDatabase;
beforeAll(async () => {
  database = await createTestDatabase();
  const author = await makePerson(database.app);
  const notebook = await makeNotebook(database.app, author);
  const entryId = await makeEntry(database.app, notebook.id, author);
  const attachmentId = await makeAttachment(database.app, entryId, author);
  const { app } = database;
  await app.insert(audit).values({ kind: 'test', personId: author.personId });
  await app.execute(sql`SELECT register_client(${entryId}, 1, 5, ${author.personId})`);
  await app.$client.query('SELECT * FROM append_updates($1, 0, 1, $2, $3, gen_random_uuid(), $4, $5)', [
    entryId,
    author.personId,
    author.loginId,
    [5],
    [Buffer.from([1])],
  ]);
  await app.execute(sql`INSERT INTO reading (attachment_id, hash, spec, summary, person_id)
    VALUES (${attachmentId}, 'h', '{}', '{}', ${author.personId})`);
  await app.execute(
    sql`INSERT INTO result (address, engine, outcome, milliseconds) VALUES ('a', 'e', '{}', 1)`,
  );
});
afterAll(() => database.drop());

const RECORD_TABLES = ['entry_update', 'attachment', 'reading', 'result', 'audit'];

/** The whole table as text, to show that nothing changed. */
async function content(table: string): Promise<string> {
  const { rows } = await database.owner.execute(
    sql.raw(`SELECT md5(string_agg(t::text, '|' ORDER BY t::text)) AS h, count(*) FROM ${table} t`),
  );
  return JSON.stringify(rows);
}

async function refusal(db: Database, statement: string): Promise<string> {
  try {
    await db.$client.query(statement);
    return 'allowed';
  } catch (error) {
    return (error as Error).message;
  }
}

describe.each(RECORD_TABLES)('record table %s', (table) => {
  const column = table === 'entry_update' ? 'seq' : table === 'result' ? 'milliseconds' : 'at';
  const verbs = [
    `UPDATE ${table} SET ${column} = ${column}`,
    `DELETE FROM ${table}`,
    `TRUNCATE ${table} CASCADE`,
    `MERGE INTO ${table} t USING (SELECT 1) s ON true WHEN MATCHED THEN UPDATE SET ${column} = t.${column}`,
    `MERGE INTO ${table} t USING (SELECT 1) s ON true WHEN MATCHED THEN DELETE`,
  ];

  test.each(['app', 'ws', 'owner'] as const)('%s cannot change or remove a row by any verb', async (role) => {
    const before = await content(table);
    for (const verb of verbs) {
      expect(await refusal(database[role], verb), `${role}: ${verb}`).toMatch(
        /permission denied|insert-only/,
      );
    }
    expect(await content(table)).toBe(before);
  });

  test('its triggers hold for the owner in replica mode, and app and ws cannot disable them', async () => {
    for (const role of ['app', 'ws'] as const) {
      expect(await refusal(database[role], `ALTER TABLE ${table} DISABLE TRIGGER insert_only`)).toMatch(
        /must be owner/,
      );
    }
    // Only a superuser may set replica mode at all, and even then ENABLE ALWAYS keeps the triggers firing.
    expect(await refusal(database.owner, 'SET session_replication_role = replica')).toMatch(
      /permission denied/,
    );
    const { rows } = await database.owner.execute<{ tgenabled: string }>(
      sql.raw(`SELECT tgenabled FROM pg_trigger WHERE tgrelid = '${table}'::regclass AND NOT tgisinternal`),
    );
    expect(rows.map((row) => row.tgenabled)).toEqual(rows.map(() => 'A'));
    expect(rows.length).toBeGreaterThanOrEqual(3);
  });
});

test('ON CONFLICT DO UPDATE on a record table is refused', async () => {
  const statement = `INSERT INTO result (address, engine, outcome, milliseconds) VALUES ('a', 'other', '{}', 2)
    ON CONFLICT (address) DO UPDATE SET engine = 'other'`;
  for (const role of ['app', 'owner'] as const) {
    expect(await refusal(database[role], statement)).toMatch(/permission denied|insert-only/);
  }
});

test('the time of a record row is the database clock, whatever the writer says', async () => {
  await database.app.execute(sql`INSERT INTO audit (kind, at) VALUES ('late', '1999-01-01')`);
  const { rows } = await database.app.execute<{ recent: boolean }>(
    sql`SELECT at > now() - interval '1 minute' AS recent FROM audit WHERE kind = 'late'`,
  );
  expect(rows[0]?.recent).toBe(true);
});

describe('least rights', () => {
  test('ws holds SELECT and EXECUTE only, and never sees a password hash', async () => {
    const { rows } = await database.owner
      .execute(sql`SELECT table_name, privilege_type FROM information_schema.table_privileges
      WHERE grantee IN ('motebook_ws', 'motebook_read') AND privilege_type <> 'SELECT'`);
    expect(rows).toEqual([]);
    expect(await refusal(database.ws, 'SELECT password_hash FROM person')).toMatch(/permission denied/);
    expect(await refusal(database.ws, 'SELECT name FROM person')).toBe('allowed');
  });

  test('app cannot move the head of an entry, its epoch or its lock past the write path', async () => {
    for (const column of [
      'head_seq = 9',
      "head_chain = ''",
      'epoch = 2',
      'lock = 3',
      "state = 'signed'",
      'bytes = 0',
    ]) {
      expect(await refusal(database.app, `UPDATE entry SET ${column}`), column).toMatch(/permission denied/);
    }
  });

  test('app and ws cannot shift the clock or make tables', async () => {
    for (const role of ['app', 'ws'] as const) {
      expect(await refusal(database[role], `INSERT INTO clock_offset (shift) VALUES ('1 day')`)).toMatch(
        /permission denied/,
      );
      expect(await refusal(database[role], 'CREATE TABLE mine (a int)')).toMatch(/permission denied/);
    }
  });

  test('no role of the product is a superuser or may make roles', async () => {
    const { rows } = await database.owner.execute(
      sql`SELECT rolname FROM pg_roles WHERE rolname LIKE 'motebook\\_%' AND (rolsuper OR rolcreaterole OR rolbypassrls)`,
    );
    expect(rows).toEqual([]);
  });
});
