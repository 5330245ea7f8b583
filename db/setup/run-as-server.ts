import { spawn, spawnSync, type ChildProcess } from 'node:child_process';
import path from 'node:path';
import { isRoot } from './postgres-binaries';

/**
 * Runs one of PostgreSQL's programs to its end, as the user it wants: as root, that is the user postgres.
 * @returns what it printed.   @throws Error with what it printed, when it fails.
 */
export function runAsServer(program: string, args: readonly string[], input?: string): string {
  const [command, ...rest] = isRoot()
    ? ['runuser', '-u', 'postgres', '--', program, ...args]
    : [program, ...args];
  const ran = spawnSync(command ?? program, rest, { input, cwd: '/', encoding: 'utf8', env: environment() });
  const said = `${ran.stdout ?? ''}${ran.stderr ?? ''}${ran.error?.message ?? ''}`;
  if (ran.status !== 0) throw new Error(`${path.basename(program)} failed:\n${said}`);
  return said;
}

/**
 * Starts PostgreSQL's server as a child of this process. The kernel asks it to shut down when this process dies, however
 * it dies; a session of its own keeps a Ctrl-C in the terminal from reaching it before those who still write.
 * @param log - file descriptor for what it prints.
 */
export function spawnServer(program: string, args: readonly string[], log: number): ChildProcess {
  const asPostgres = ['--reuid', 'postgres', '--regid', 'postgres', '--init-groups'];
  const setpriv = [...(isRoot() ? asPostgres : []), '--pdeathsig', 'INT', '--', program, ...args];
  return spawn('setpriv', setpriv, {
    cwd: '/',
    detached: true,
    stdio: ['ignore', log, log],
    env: environment(),
  });
}

/** Messages in English, whatever the machine's language, because a few of them are looked for. Nothing else is handed on. */
function environment(): NodeJS.ProcessEnv {
  return {
    NODE_ENV: process.env.NODE_ENV,
    PATH: process.env.PATH ?? '/usr/bin:/bin',
    LC_ALL: 'C.UTF-8',
    TZ: 'UTC',
  };
}
