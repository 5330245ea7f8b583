import { readFileSync } from 'node:fs';
import path from 'node:path';
import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { migrateDatabase } from '../../../db/setup/migrate';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';

let database: TestDatabase;
beforeAll(async () => {
  database = await createTestDatabase();
});
afterAll(() => database.drop());

const journal = JSON.parse(
  readFileSync(path.resolve(import.meta.dirname, '../../../drizzle/meta/_journal.json'), 'utf8'),
) as { entries: { when: number }[] };

async function applied(): Promise<{ hash: string }[]> {
  const { rows } = await database.owner.execute<{ hash: string }>(
    sql`SELECT hash FROM drizzle.__drizzle_migrations ORDER BY id`,
  );
  return rows;
}

test('migrating again changes nothing, also when several do it at once', async () => {
  const before = await applied();
  expect(before).toHaveLength(journal.entries.length);
  await Promise.all(Array.from({ length: 4 }, () => migrateDatabase(database.urls.motebook_owner)));
  expect(await applied()).toEqual(before);
});

test('migrations are dated in the order in which they apply', () => {
  const dates = journal.entries.map((entry) => entry.when);
  expect(dates).toEqual([...dates].sort((a, b) => a - b));
});

test('no other role may migrate', async () => {
  for (const role of ['motebook_app', 'motebook_ws', 'motebook_read', 'motebook_backup'] as const) {
    await expect(migrateDatabase(database.urls[role]), role).rejects.toThrow();
  }
});

test('a database of a newer version is refused and left as it is', async () => {
  await database.owner.execute(
    sql`INSERT INTO drizzle.__drizzle_migrations (hash, created_at) VALUES ('of the future', 99999999999999)`,
  );
  const before = await applied();
  await expect(migrateDatabase(database.urls.motebook_owner)).rejects.toThrow(/newer version/);
  expect(await applied()).toEqual(before);
  await database.owner.execute(sql`DELETE FROM drizzle.__drizzle_migrations WHERE hash = 'of the future'`);
  await migrateDatabase(database.urls.motebook_owner);
});

test('a migration that was edited after it was applied is noticed', async () => {
  await database.owner.execute(sql`UPDATE drizzle.__drizzle_migrations SET hash = 'edited' WHERE id = 1`);
  await expect(migrateDatabase(database.urls.motebook_owner)).rejects.toThrow(/Migration 1 of the database/);
});
