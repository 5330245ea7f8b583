import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import type { Database } from '../../../db/client';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';

let database: TestDatabase;
beforeAll(async () => {
  database = await createTestDatabase();
});
afterAll(() => database.drop());

/** Seconds by which the record's clock is ahead of the machine's. */
async function ahead(db: Database): Promise<number> {
  const { rows } = await db.execute<{ seconds: number }>(
    sql`SELECT extract(epoch FROM motebook_now() - clock_timestamp())::float8 AS seconds`,
  );
  return rows[0]?.seconds ?? NaN;
}

test('the record’s clock is the database’s, for every role', async () => {
  for (const db of [database.app, database.ws, database.owner])
    expect(Math.abs(await ahead(db))).toBeLessThan(0.5);
});

test('it runs on within a transaction, so that two rows of one can be told apart', async () => {
  await database.app.transaction(async (tx) => {
    const read = async () =>
      (await tx.execute<{ at: string }>(sql`SELECT motebook_now()::text AS at`)).rows[0]?.at;
    const [first, second] = [await read(), await read()];
    expect(first).not.toBe(second);
  });
});

test('the owner may shift it, for all alike, and there is one shift only', async () => {
  await database.owner.execute(sql`INSERT INTO clock_offset (shift) VALUES ('-3 days')`);
  for (const db of [database.app, database.ws]) expect(await ahead(db)).toBeCloseTo(-3 * 86_400, 0);
  await database.app.execute(sql`INSERT INTO audit (kind) VALUES ('shifted')`);
  const { rows } = await database.app.execute<{ days: number }>(
    sql`SELECT extract(epoch FROM clock_timestamp() - at)::float8 / 86400 AS days FROM audit WHERE kind = 'shifted'`,
  );
  expect(rows[0]?.days).toBeCloseTo(3, 2);
  await expect(
    database.owner.$client.query(`INSERT INTO clock_offset (shift) VALUES ('1 day')`),
  ).rejects.toThrow(/duplicate key/);
  await database.owner.execute(sql`DELETE FROM clock_offset`);
  expect(Math.abs(await ahead(database.ws))).toBeLessThan(0.5);
});
