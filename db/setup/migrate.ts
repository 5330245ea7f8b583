import path from 'node:path';
import { readMigrationFiles } from 'drizzle-orm/migrator';
import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import pg from 'pg';

const MIGRATIONS = path.resolve(import.meta.dirname, '../../drizzle');
/** Any fixed number: it only has to be the same for everybody who migrates. */
const ADVISORY_LOCK = 7_401_955;

/**
 * Brings a database to the newest migration this code knows: forward only, all in one transaction, one process at a time.
 * @param ownerUrl - address for the role motebook_owner; no other role may change tables.
 * @throws Error when the database holds a migration that this code does not know; nothing was changed then.
 */
export async function migrateDatabase(ownerUrl: string): Promise<void> {
  const client = new pg.Client({ connectionString: ownerUrl, application_name: 'motebook-migrate' });
  client.on('error', (error) => console.error(`database connection lost (migration): ${error.message}`));
  await client.connect();
  try {
    await client.query('SELECT pg_advisory_lock($1)', [ADVISORY_LOCK]);
    await refuseUnknown(client);
    await migrate(drizzle(client), { migrationsFolder: MIGRATIONS });
  } finally {
    // Ending the connection also gives the advisory lock back.
    await client.end();
  }
}

/** By hash, not by date: a migration that was edited after it was applied is as unknown as one of a newer version. */
async function refuseUnknown(client: pg.Client): Promise<void> {
  const { rows: tables } = await client.query<{ there: boolean }>(
    `SELECT to_regclass('drizzle.__drizzle_migrations') IS NOT NULL AS there`,
  );
  if (!tables[0]?.there) return;
  const known = new Set(
    readMigrationFiles({ migrationsFolder: MIGRATIONS }).map((migration) => migration.hash),
  );
  const { rows } = await client.query<{ hash: string }>(
    'SELECT hash FROM drizzle.__drizzle_migrations ORDER BY id',
  );
  const unknown = rows.findIndex((row) => !known.has(row.hash));
  if (unknown === -1) return;
  throw new Error(
    `Migration ${unknown + 1} of the database is not known to this Motebook: a newer version made it. Start that version again; nothing was changed. (Who edits migrations that were never released: npm run reset.)`,
  );
}
