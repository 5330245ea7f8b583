import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync } from 'node:fs';
import path from 'node:path';

const DEBIAN_FOLDER = '/usr/lib/postgresql';
const OLDEST_VERSION = 15;

/** True when this process may act as other users and install packages. */
export const isRoot = (): boolean => process.getuid?.() === 0;

/** Folder of the newest usable PostgreSQL server programs of Debian, or null. */
export function findPostgresBinaries(): string | null {
  if (!existsSync(DEBIAN_FOLDER)) return null;
  const versions = readdirSync(DEBIAN_FOLDER)
    .map(Number)
    .filter((version) => version >= OLDEST_VERSION)
    .sort((a, b) => b - a);
  for (const version of versions) {
    const folder = path.join(DEBIAN_FOLDER, String(version), 'bin');
    if (existsSync(path.join(folder, 'initdb')) && existsSync(path.join(folder, 'postgres'))) return folder;
  }
  return null;
}

/**
 * Folder of the PostgreSQL server programs; as root Debian's package is installed when they are missing.
 * @throws Error with the remedy when they are missing and this user may not install them, or installing failed.
 */
export function getPostgresBinaries(say: (line: string) => void): string {
  const found = findPostgresBinaries();
  if (found) return found;
  if (!isRoot()) {
    throw new Error(
      'PostgreSQL is not installed, and only root may install it. Run "sudo apt-get install postgresql", then start again.',
    );
  }
  say('Installing PostgreSQL from Debian …');
  aptInstall('postgresql');
  const installed = findPostgresBinaries();
  if (!installed) throw new Error(`PostgreSQL ${OLDEST_VERSION} or newer was not found after installing it.`);
  return installed;
}

/** Installs a Debian package without questions. @throws Error with apt's last lines. */
export function aptInstall(packageName: string): void {
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  for (const command of [
    ['update', '-qq'],
    ['install', '-y', '-qq', packageName],
  ]) {
    const run = spawnSync('apt-get', command, { env, encoding: 'utf8' });
    if (run.status !== 0) {
      const last = `${run.stdout}\n${run.stderr}\n${run.error?.message ?? ''}`
        .trim()
        .split('\n')
        .slice(-6)
        .join('\n');
      throw new Error(
        `"apt-get ${command.join(' ')}" failed. Check the network and Debian's sources, then start again.\n${last}`,
      );
    }
  }
}
