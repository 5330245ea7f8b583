import type { ChildProcess } from 'node:child_process';
import { closeSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { lastLines, openLog } from './log-file';
import { spawnServer } from './run-as-server';
import { sendSignal } from './send-signal';

/** Long enough for the recovery after a crash; only the point at which waiting makes no sense any more. */
const START_SECONDS = 300;
const STOP_SECONDS = 60;
const TRIES = 20;

/** PostgreSQL's server on one data directory, as a child of this process. */
export class ServerProcess {
  private child: ChildProcess | null = null;
  /** Called when the server ends without having been asked to. */
  onLost: () => void = () => undefined;

  constructor(
    private readonly at: {
      readonly binaries: string;
      readonly data: string;
      readonly port: number;
      readonly log: string;
    },
  ) {}

  /** Process id of the server's first process, while it runs as this process's child. */
  get pid(): number | null {
    return this.child?.pid ?? null;
  }

  /** Starts the server and waits until it takes connections. @throws Error with the last lines of its log. */
  async start(): Promise<void> {
    if (this.child) return;
    await this.endStray();
    for (let tries = 1; ; tries++) {
      const fault = await this.attempt();
      if (fault === null) return;
      // After a hard kill of its first process, the others need a moment to notice and let go of their memory.
      if (tries >= TRIES || !/still in use|already exists/.test(fault)) {
        throw new Error(`PostgreSQL does not start. The end of ${this.at.log}:\n${fault}`);
      }
      await pause(500);
    }
  }

  /** Ends the server: no new work, open transactions rolled back, everything on disk. */
  async stop(): Promise<void> {
    const child = this.child;
    if (!child) return;
    this.child = null;
    const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()));
    // Fast shutdown; later immediate shutdown, which loses nothing committed but needs recovery at the next start.
    child.kill('SIGINT');
    const insist = setTimeout(() => child.kill('SIGQUIT'), STOP_SECONDS * 1000);
    await ended;
    clearTimeout(insist);
  }

  private async attempt(): Promise<string | null> {
    const { binaries, data, port, log } = this.at;
    const descriptor = openLog(log);
    const child = spawnServer(path.join(binaries, 'postgres'), ['-D', data, '-p', String(port)], descriptor);
    closeSync(descriptor);
    let ended: string | null = null;
    child.once('error', (error) => (ended = error.message));
    child.once('exit', () => (ended ??= lastLines(log, 6)));
    const deadline = Date.now() + START_SECONDS * 1000;
    while (!this.isReady(child.pid)) {
      if (ended !== null) return ended;
      if (Date.now() > deadline) {
        child.kill('SIGINT');
        return `not ready after ${START_SECONDS} s\n${lastLines(log, 6)}`;
      }
      await pause(50);
    }
    this.child = child;
    child.once('exit', () => {
      if (this.child !== child) return;
      this.child = null;
      this.onLost();
    });
    return null;
  }

  /** The server itself notes in its lock file when it is ready (line 8). */
  private isReady(pid: number | undefined): boolean {
    const lines = this.lockFile();
    return pid !== undefined && Number(lines[0]) === pid && lines[7]?.trim() === 'ready';
  }

  /** Ends a server that runs on these data without belonging to this process (its start was killed a moment ago). */
  private async endStray(): Promise<void> {
    const pid = Number(this.lockFile()[0]);
    if (!Number.isInteger(pid) || pid <= 0) return;
    const deadline = Date.now() + STOP_SECONDS * 1000;
    while (servesData(pid, this.at.data)) {
      if (Date.now() > deadline)
        throw new Error(`PostgreSQL (process ${pid}) runs on ${this.at.data} and does not stop.`);
      // Repeating it does no harm: the server is on its way down already.
      sendSignal(pid, 'SIGINT');
      await pause(50);
    }
  }

  private lockFile(): string[] {
    try {
      return readFileSync(path.join(this.at.data, 'postmaster.pid'), 'utf8').split('\n');
    } catch (error) {
      if ((error as NodeJS.ErrnoException).code === 'ENOENT') return [];
      throw error;
    }
  }
}

/** Whether a pid is a PostgreSQL server on these data: pids are given anew to strangers. */
function servesData(pid: number, data: string): boolean {
  try {
    const command = readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0');
    return path.basename(command[0] ?? '') === 'postgres' && command.includes(data);
  } catch {
    return false;
  }
}
