import { randomBytes } from 'node:crypto';
import { chmodSync, existsSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { DATABASE_ROLES, type DatabaseRole } from './roles';

/** What a managed installation makes up for itself at its first start. Never leaves the data folder and the environment. */
export interface Secrets {
  readonly databasePasswords: Readonly<Record<DatabaseRole, string>>;
  /** Signs the sign-in cookie. */
  readonly signIn: string;
  /** Shared by the product and the local file service. */
  readonly fileServiceKey: string;
  readonly fileServiceApp: string;
}

const random = (bytes: number) => randomBytes(bytes).toString('hex');

/** The secrets of a data folder, or null when none were made yet. */
export function findSecrets(folder: string): Secrets | null {
  const file = path.join(folder, 'secrets.json');
  return existsSync(file) ? (JSON.parse(readFileSync(file, 'utf8')) as Secrets) : null;
}

/** The secrets of a data folder, made on first use; readable by this user only. */
export function ensureSecrets(folder: string): Secrets {
  const found = findSecrets(folder);
  if (found) return found;
  const file = path.join(folder, 'secrets.json');
  const secrets: Secrets = {
    databasePasswords: Object.fromEntries(
      DATABASE_ROLES.map((role) => [role, random(24)]),
    ) as Secrets['databasePasswords'],
    signIn: random(32),
    fileServiceKey: `sk_local_${random(24)}`,
    fileServiceApp: random(6),
  };
  // Written whole or not at all: half a file of secrets would lock the installation out of its own database.
  writeFileSync(`${file}.new`, JSON.stringify(secrets, null, 2), { mode: 0o600 });
  chmodSync(`${file}.new`, 0o600);
  renameSync(`${file}.new`, file);
  return secrets;
}
