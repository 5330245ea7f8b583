/** The database roles: owner migrates, app serves and projects, ws edits, read reads, backup dumps. None is a superuser. */
export const DATABASE_ROLES = [
  'motebook_owner',
  'motebook_app',
  'motebook_ws',
  'motebook_read',
  'motebook_backup',
] as const;
export type DatabaseRole = (typeof DATABASE_ROLES)[number];

export const DATABASE_NAME = 'motebook';

/** Statements, one a line as single-user mode wants them, that make the roles and the database of a new cluster. */
export function roleStatements(
  passwords: Readonly<Record<DatabaseRole, string>>,
  ownerMakesDatabases: boolean,
): string[] {
  const attributes = (role: DatabaseRole) =>
    `LOGIN NOSUPERUSER NOCREATEROLE NOREPLICATION ${role === 'motebook_owner' && ownerMakesDatabases ? 'CREATEDB' : 'NOCREATEDB'}`;
  return [
    ...DATABASE_ROLES.map((role) => `CREATE ROLE ${role} ${attributes(role)} PASSWORD '${passwords[role]}';`),
    'GRANT pg_read_all_data TO motebook_backup;',
    `CREATE DATABASE ${DATABASE_NAME} OWNER motebook_owner;`,
    `REVOKE ALL ON DATABASE ${DATABASE_NAME} FROM PUBLIC;`,
    `GRANT CONNECT ON DATABASE ${DATABASE_NAME} TO ${DATABASE_ROLES.join(', ')};`,
    // Copying a database needs a connection to another one; nothing else does.
    ...(ownerMakesDatabases ? [] : ['REVOKE ALL ON DATABASE postgres, template1 FROM PUBLIC;']),
  ];
}
