import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { connect, type Database } from '../../../db/client';
import { audit } from '../../../db/schema/index';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { makeAttachment, makeEntry, makeNotebook, makePerson } from '../../helpers/factories';

let database: TestDatabase;
let reader: Database;
let backup: Database;
beforeAll(async () => {
  database = await createTestDatabase();
  reader = connect(database.urls.motebook_read, { max: 1, name: 'test-read' });
  backup = connect(database.urls.motebook_backup, { max: 1, name: 'test-backup' });
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
afterAll(async () => {
  await Promise.all([reader, backup].map((one) => one.$client.end()));
  await database.drop();
});

function as(role: (typeof ROLES)[number]): Database {
  if (role === 'read') return reader;
  return role === 'backup' ? backup : database[role];
}

const KEYS: Readonly<Record<string, string>> = {
  entry_update: 'entry_id, epoch, seq',
  attachment: 'id',
  reading: 'id',
  result: 'address',
  audit: 'id',
};
const RECORD_TABLES = Object.keys(KEYS);
const ROLES = ['app', 'ws', 'owner', 'read', 'backup'] as const;

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
    `INSERT INTO ${table} OVERRIDING SYSTEM VALUE SELECT * FROM ${table}
       ON CONFLICT (${KEYS[table]}) DO UPDATE SET ${column} = EXCLUDED.${column}`,
  ];

  test.each(ROLES)('%s cannot change or remove a row by any verb', async (role) => {
    const before = await content(table);
    for (const verb of verbs) {
      expect(await refusal(as(role), verb), `${role}: ${verb}`).toMatch(/permission denied|insert-only/);
    }
    expect(await content(table)).toBe(before);
  });

  test('its triggers hold for the owner in replica mode, and nobody else can disable them', async () => {
    for (const role of ['app', 'ws', 'read', 'backup'] as const) {
      expect(await refusal(as(role), `ALTER TABLE ${table} DISABLE TRIGGER insert_only`)).toMatch(
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

test('the time of a record row is the database clock, whatever the writer says', async () => {
  await database.app.execute(sql`INSERT INTO audit (kind, at) VALUES ('late', '1999-01-01')`);
  const { rows } = await database.app.execute<{ recent: boolean }>(
    sql`SELECT at > now() - interval '1 minute' AS recent FROM audit WHERE kind = 'late'`,
  );
  expect(rows[0]?.recent).toBe(true);
});
