import { createHash } from 'node:crypto';
import { chmodSync, existsSync, mkdirSync, statSync } from 'node:fs';
import path from 'node:path';
import { isRoot } from './postgres-binaries';

const SYSTEM_FOLDER = '/var/lib/motebook';
const PASS_THROUGH = 0o011;

/**
 * Where a project keeps its data: under the project; but PostgreSQL refuses to run as root, so for root it runs as the
 * user postgres, who must be able to reach the folder. When he cannot (a clone under a closed home), the data go to a
 * folder of /var/lib named after the project's path, so that the next start finds them again. The answer must not
 * depend on whether PostgreSQL is installed yet, so it is read from the permissions alone.
 */
export function dataFolder(project: string, given?: string, root: boolean = isRoot()): string {
  if (given) return path.resolve(project, given);
  if (!root || findClosedParent(project) === null) return path.join(project, '.motebook');
  const name = createHash('sha256').update(project, 'utf8').digest('hex').slice(0, 12);
  return path.join(SYSTEM_FOLDER, name);
}

/** The first folder on the way to `folder`, itself included, that other users may not pass through; null when all are open. */
export function findClosedParent(folder: string): string | null {
  const parent = path.dirname(folder);
  const closed = parent === folder ? null : findClosedParent(parent);
  if (closed !== null) return closed;
  return (statSync(folder).mode & 0o001) === 0 ? folder : null;
}

/**
 * Makes the data folder. Others may pass through it (postgres must, when root owns it) but not look around.
 * @throws Error with the remedy, when the user postgres could not reach it.
 */
export function makeDataFolder(folder: string): void {
  const missing: string[] = [];
  let there = folder;
  for (; !existsSync(there); there = path.dirname(there)) missing.unshift(there);
  // The folder itself, when it is there, can be opened below; the way to it belongs to somebody else.
  const closed = isRoot() ? findClosedParent(there === folder ? path.dirname(folder) : there) : null;
  if (closed !== null) {
    throw new Error(
      `PostgreSQL runs as the user postgres, who may not pass through ${closed} to the data folder ${folder}. Set MOTEBOOK_DATA to a folder that other users can reach, or allow it with: chmod o+x ${closed}`,
    );
  }
  // One by one, because a strict umask would close the folders on the way too.
  for (const at of missing) {
    mkdirSync(at, { mode: 0o711 });
    chmodSync(at, 0o711);
  }
  const { mode } = statSync(folder);
  if (isRoot() && (mode & PASS_THROUGH) !== PASS_THROUGH) chmodSync(folder, (mode & 0o7777) | PASS_THROUGH);
}
