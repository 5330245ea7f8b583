import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test, vi } from 'vitest';
import { connect } from '../../../db/client';
import { isDatabaseAway } from '../../../db/is-database-away';
import { until } from '../../helpers/collab-clients';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';

let database: TestDatabase;
beforeAll(async () => {
  // A lost connection is told in the log; here it is asked for.
  vi.spyOn(console, 'error').mockImplementation(() => undefined);
  database = await createTestDatabase();
});
afterAll(async () => {
  await database.drop();
  vi.restoreAllMocks();
});

const cut = (name: string) =>
  database.app.execute(
    sql`SELECT pg_terminate_backend(pid) FROM pg_stat_activity
        WHERE application_name = ${name} AND datname = current_database()`,
  );

/** Faults that would end a process of the product: it has no listener of its own for them. */
async function uncaughtDuring(run: () => Promise<void>): Promise<unknown[]> {
  const uncaught: unknown[] = [];
  const others = process.listeners('uncaughtException');
  process.removeAllListeners('uncaughtException');
  process.on('uncaughtException', (error) => uncaught.push(error));
  try {
    await run();
    await new Promise((resolve) => setTimeout(resolve, 100));
  } finally {
    process.removeAllListeners('uncaughtException');
    for (const listener of others) process.on('uncaughtException', listener);
  }
  return uncaught;
}

test('a connection that is cut between two statements of a transaction fails the transaction, not the process', async () => {
  const db = connect(database.urls.motebook_app, { max: 2, name: 'test-cut' });
  let fault: unknown;
  const uncaught = await uncaughtDuring(async () => {
    let gone = false;
    await db
      .transaction(async (tx) => {
        await tx.execute(sql`SELECT 1`);
        await cut('test-cut');
        await until('the connection is gone', async () => {
          const { rows } = await database.app.execute<{ n: number }>(
            sql`SELECT count(*)::int AS n FROM pg_stat_activity WHERE application_name = 'test-cut'`,
          );
          return (gone = rows[0]?.n === 0);
        });
        await new Promise((resolve) => setTimeout(resolve, 50));
        await tx.execute(sql`SELECT 1`);
      })
      .catch((error: unknown) => (fault = error));
    expect(gone).toBe(true);
  });
  expect(uncaught).toEqual([]);
  expect(fault).toBeInstanceOf(Error);
  expect(isDatabaseAway(fault)).toBe(true);
  // The next one gets a fresh connection.
  expect((await db.execute<{ one: number }>(sql`SELECT 1 AS one`)).rows).toEqual([{ one: 1 }]);
  await db.$client.end();
});

test('a database that is away is told from one that refuses', async () => {
  const faultOf = async (url: string, statement = sql`SELECT 1`) => {
    const db = connect(url, { max: 1, name: 'test-fault' });
    const fault: unknown = await db.execute(statement).then(
      () => null,
      (error: unknown) => error,
    );
    await db.$client.end();
    return fault;
  };
  const nowhere = new URL(database.urls.motebook_app);
  nowhere.port = '1';
  expect(isDatabaseAway(await faultOf(nowhere.href))).toBe(true);
  const stranger = database.urls.motebook_app.replace(/:[0-9a-f]+@/, `:${'0'.repeat(48)}@`);
  expect(isDatabaseAway(await faultOf(stranger))).toBe(false);
  expect(isDatabaseAway(await faultOf(database.urls.motebook_app, sql`SELECT 1 / 0`))).toBe(false);
  expect(isDatabaseAway(await faultOf(database.urls.motebook_app, sql`DELETE FROM audit`))).toBe(false);
  expect(isDatabaseAway(null)).toBe(false);
});
