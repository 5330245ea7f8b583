import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import pg from 'pg';
import { env } from './env';
import * as schema from './schema/index';

export type Database = NodePgDatabase<typeof schema> & { $client: pg.Pool };
/** A transaction, or the database itself where no transaction is needed. */
export type Transaction = Parameters<Parameters<Database['transaction']>[0]>[0];
export type Connection = Database | Transaction;

const bigintAsNumber = (text: string) => {
  const value = Number(text);
  if (!Number.isSafeInteger(value)) throw new RangeError(`bigint ${text} is beyond what a number can hold`);
  return value;
};
pg.types.setTypeParser(pg.types.builtins.INT8, bigintAsNumber);

/** Opens a pool for one role. Waits are bounded, so that a stuck statement cannot hold a request for ever. */
export function connect(url: string, options: { max: number; name: string }): Database {
  const pool = new pg.Pool({
    connectionString: url,
    max: options.max,
    application_name: options.name,
    connectionTimeoutMillis: 10_000,
    statement_timeout: 30_000,
    lock_timeout: 10_000,
    idle_in_transaction_session_timeout: 30_000,
  });
  // An idle connection that dies (server restart) emits here; without a listener it would end the process.
  pool.on('error', (error) => console.error(`database connection lost (${options.name}): ${error.message}`));
  // One that dies between two statements of a transaction emits by itself; the next statement fails and tells whoever waits.
  pool.on('connect', (client) => client.on('error', () => undefined));
  return drizzle(pool, { schema });
}

declare global {
  var motebookDatabase: Database | undefined;
}

/** The web process's database, kept across development reloads. */
export function db(): Database {
  globalThis.motebookDatabase ??= connect(env().MOTEBOOK_DATABASE_APP, { max: 12, name: 'motebook-web' });
  return globalThis.motebookDatabase;
}
