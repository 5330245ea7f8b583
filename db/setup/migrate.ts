import { readFileSync } from 'node:fs';
import path from 'node:path';
import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import pg from 'pg';

const MIGRATIONS = path.resolve(import.meta.dirname, '../../drizzle');
/** Any fixed number: it only has to be the same for everybody who migrates. */
const ADVISORY_LOCK = 7_401_955;

/**
 * Brings a database to the newest migration this code knows: forward only, one process at a time.
 * @param ownerUrl - address for the role motebook_owner; no other role may change tables.
 * @throws Error when the database is newer than this code, or does not keep what it acknowledges.
 */
export async function migrateDatabase(ownerUrl: string): Promise<void> {
  const client = new pg.Client({ connectionString: ownerUrl });
  client.on('error', (error) => console.error(`database connection lost (migration): ${error.message}`));
  await client.connect();
  try {
    await checkServer(client);
    await client.query('SELECT pg_advisory_lock($1)', [ADVISORY_LOCK]);
    await refuseNewer(client);
    await migrate(drizzle(client), { migrationsFolder: MIGRATIONS });
  } finally {
    // Ending the connection also gives the advisory lock back.
    await client.end();
  }
}

/** An acknowledgement means "on disk": refuse a server that would lie about it (integrity rule C1). */
async function checkServer(client: pg.Client): Promise<void> {
  const { rows } = await client.query<{ name: string; setting: string }>(
    `SELECT name, setting FROM pg_settings WHERE name IN ('fsync', 'synchronous_commit', 'full_page_writes', 'data_checksums')`,
  );
  const off = rows.filter((row) => row.setting !== 'on').map((row) => row.name);
  if (off.length > 0)
    throw new Error(`PostgreSQL must run with ${off.join(', ')} = on; otherwise saved text could be lost.`);
  const { rows: roles } = await client.query<{ rolname: string }>(
    `SELECT rolname FROM pg_roles WHERE rolsuper AND rolname LIKE 'motebook\\_%'`,
  );
  if (roles.length > 0) throw new Error(`The role ${roles[0]?.rolname} must not be a superuser.`);
}

async function refuseNewer(client: pg.Client): Promise<void> {
  const { rows: tables } = await client.query<{ there: boolean }>(
    `SELECT to_regclass('drizzle.__drizzle_migrations') IS NOT NULL AS there`,
  );
  if (!tables[0]?.there) return;
  const { rows } = await client.query<{ newest: string | null }>(
    'SELECT max(created_at) AS newest FROM drizzle.__drizzle_migrations',
  );
  const journal = JSON.parse(readFileSync(path.join(MIGRATIONS, 'meta/_journal.json'), 'utf8')) as {
    entries: { when: number }[];
  };
  const known = Math.max(...journal.entries.map((entry) => entry.when));
  if (Number(rows[0]?.newest ?? 0) > known) {
    throw new Error(
      'The database was made by a newer Motebook than this one. Start the newer version again; nothing was changed.',
    );
  }
}
