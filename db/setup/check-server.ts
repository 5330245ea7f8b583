import pg from 'pg';

const DURABILITY = ['fsync', 'synchronous_commit', 'full_page_writes', 'data_checksums'];

/**
 * Refuses a database that would not keep what it acknowledges, or a role that could go past the record's rules
 * (integrity rules C1 and D1). Asked under each address that the product uses, because a role may have settings of its own.
 * @param url - address of the database for one role.
 * @throws Error that names the setting or the role.
 */
export async function checkServer(url: string): Promise<void> {
  const client = new pg.Client({ connectionString: url, application_name: 'motebook-check' });
  client.on('error', (error) => console.error(`database connection lost (check): ${error.message}`));
  await client.connect();
  try {
    await checkDurability(client);
    await checkRole(client);
  } finally {
    await client.end();
  }
}

async function checkDurability(client: pg.Client): Promise<void> {
  const { rows } = await client.query<{ name: string }>(
    `SELECT name FROM pg_settings WHERE name = ANY ($1) AND setting <> 'on' ORDER BY name`,
    [DURABILITY],
  );
  if (rows.length === 0) return;
  const off = rows.map((row) => row.name).join(', ');
  throw new Error(
    `PostgreSQL must run with ${off} = on; otherwise text that was shown as saved could be lost. Set this in postgresql.conf (data_checksums: when the cluster is made, or with pg_checksums).`,
  );
}

async function checkRole(client: pg.Client): Promise<void> {
  const { rows } = await client.query<{ rolname: string }>(
    `SELECT rolname FROM pg_roles WHERE (rolname = current_user OR rolname LIKE 'motebook\\_%')
       AND (rolsuper OR rolbypassrls OR rolreplication) ORDER BY rolname`,
  );
  if (rows.length === 0) return;
  const names = rows.map((row) => row.rolname).join(', ');
  throw new Error(
    `The database role ${names} must not be a superuser, nor hold BYPASSRLS or REPLICATION: it could change the record. Take these from it with ALTER ROLE.`,
  );
}
