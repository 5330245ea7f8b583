import { spawnSync } from 'node:child_process';
import { appendFileSync, mkdirSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { isRoot } from './postgres-binaries';
import { DATABASE_ROLES } from './roles';
import { runAsServer } from './run-as-server';

/** Durability is stated, not assumed; an acknowledgement to a writer rests on these (integrity rule C1). */
const CONFIGURATION = `
# Motebook
listen_addresses = '127.0.0.1'
unix_socket_directories = ''
max_connections = 120
fsync = on
synchronous_commit = on
full_page_writes = on
timezone = 'UTC'
log_timezone = 'UTC'
password_encryption = 'scram-sha-256'
log_line_prefix = '%m [%p] %u@%d '
`;

const ACCESS = `# Only the product's roles, only over loopback, only with a password. Nobody signs in as superuser.
host all ${DATABASE_ROLES.join(',')} 127.0.0.1/32 scram-sha-256
local all all reject
host all all 0.0.0.0/0 reject
host all all ::/0 reject
`;

/**
 * Makes a new cluster at `data`: checksums on, UTF-8, a superuser without password whom pg_hba.conf never lets in. Roles
 * and database are made in single-user mode. It gets its name only when it is complete, so that an attempt that was cut
 * short is never taken for data, nor data for such an attempt.
 */
export function makeCluster(data: string, binaries: string, statements: readonly string[]): void {
  const attempt = `${data}.new`;
  rmSync(attempt, { recursive: true, force: true });
  mkdirSync(attempt, { mode: 0o700 });
  giveToServer(attempt);
  const initdb = ['-D', attempt, '-U', 'postgres', '--data-checksums', '-A', 'reject', '-E', 'UTF8'];
  runAsServer(path.join(binaries, 'initdb'), [...initdb, '--locale=C.UTF-8']);
  appendFileSync(path.join(attempt, 'postgresql.conf'), CONFIGURATION);
  writeFileSync(path.join(attempt, 'pg_hba.conf'), ACCESS);
  const singleUser = ['--single', '-D', attempt, 'postgres'];
  const said = runAsServer(path.join(binaries, 'postgres'), singleUser, `${statements.join('\n')}\n`);
  if (/\b(ERROR|FATAL|PANIC):/.test(said)) {
    throw new Error(
      `The database roles could not be made:\n${said.replace(/PASSWORD '[^']*'/g, "PASSWORD '…'")}`,
    );
  }
  renameSync(attempt, data);
}

function giveToServer(folder: string): void {
  if (!isRoot()) return;
  const ran = spawnSync('chown', ['postgres:postgres', folder], { encoding: 'utf8' });
  if (ran.status !== 0) throw new Error(`The user postgres could not be given ${folder}: ${ran.stderr}`);
}
