import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import path from 'node:path';
import { isRoot } from './postgres-binaries';

/**
 * Where a project keeps its data: under the project; but PostgreSQL refuses to run as root, so for root it runs as the
 * user postgres, who must be able to reach the folder. When he cannot (a clone under a closed home), the data go to a
 * folder of /var/lib named after the project's path, so that the next start finds them again.
 */
export function dataFolder(project: string, given?: string): string {
  if (given) return path.resolve(given);
  const own = path.join(project, '.motebook');
  if (!isRoot() || postgresReaches(project)) return own;
  const name = createHash('sha256').update(project, 'utf8').digest('hex').slice(0, 12);
  return path.join('/var/lib/motebook', name);
}

function postgresReaches(folder: string): boolean {
  return spawnSync('runuser', ['-u', 'postgres', '--', 'test', '-x', folder]).status === 0;
}
