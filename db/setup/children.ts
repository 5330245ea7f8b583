import { spawn, type ChildProcess } from 'node:child_process';
import { createWriteStream, existsSync, mkdirSync, renameSync, statSync, type WriteStream } from 'node:fs';
import path from 'node:path';

export interface ChildPlan {
  readonly name: string;
  /** Arguments of node: the program and what follows. */
  readonly args: readonly string[];
  readonly environment: Readonly<Record<string, string>>;
}

const LOG_BYTES = 5 * 1024 * 1024;
const SHORTEST_PAUSE_MS = 200;
const LONGEST_PAUSE_MS = 5_000;

/**
 * Keeps a set of processes running: each has a log, is started again when it dies (with a growing pause), and ends with
 * this process, however this process ends.
 */
export class Children {
  private readonly running = new Map<string, ChildProcess>();
  private readonly pauses = new Map<string, number>();
  private stopping = false;

  constructor(
    private readonly project: string,
    private readonly logFolder: string,
    private readonly say: (line: string) => void,
  ) {
    mkdirSync(logFolder, { recursive: true });
  }

  /** Process ids by name, for the note that a later start reads. */
  pids(): Record<string, number> {
    return Object.fromEntries([...this.running].map(([name, child]) => [name, child.pid ?? 0]));
  }

  start(plan: ChildPlan): void {
    if (this.stopping) return;
    const log = this.openLog(plan.name);
    const started = Date.now();
    const child: ChildProcess = spawn(
      process.execPath,
      ['--import', path.join(this.project, 'db/setup/end-with-parent.mjs'), ...plan.args],
      {
        cwd: this.project,
        env: { ...inherited(), ...plan.environment } as unknown as NodeJS.ProcessEnv,
        stdio: ['ignore', 'pipe', 'pipe', 'ipc'],
      },
    );
    child.stdout?.pipe(log, { end: false });
    child.stderr?.on('data', (text: Buffer) => {
      log.write(text);
      process.stderr.write(text.toString('utf8').replace(/^(?=.)/gm, `[${plan.name}] `));
    });
    child.on('error', (error: Error) => this.say(`${plan.name} could not be started: ${error.message}`));
    child.on('exit', (code: number | null, signal: string | null) => {
      this.running.delete(plan.name);
      log.end();
      if (this.stopping) return;
      // A process that lived a while had a good start: its next pause is short again.
      const before = Date.now() - started > 30_000 ? 0 : (this.pauses.get(plan.name) ?? 0);
      const pause = Math.min(LONGEST_PAUSE_MS, Math.max(SHORTEST_PAUSE_MS, before * 2));
      this.pauses.set(plan.name, pause);
      this.say(
        `${plan.name} ended (${signal ?? `code ${code}`}); starting it again. Its log: ${this.logFile(plan.name)}`,
      );
      setTimeout(() => this.start(plan), pause);
    });
    this.running.set(plan.name, child);
  }

  /** Asks every process to end, waits, and after ten seconds insists. */
  async stop(): Promise<void> {
    this.stopping = true;
    const ending = [...this.running.values()].map(
      (child) =>
        new Promise<void>((resolve) => {
          const insist = setTimeout(() => child.kill('SIGKILL'), 10_000);
          child.once('exit', () => {
            clearTimeout(insist);
            resolve();
          });
          child.kill('SIGTERM');
        }),
    );
    await Promise.all(ending);
  }

  private logFile(name: string): string {
    return path.join(this.logFolder, `${name}.log`);
  }

  private openLog(name: string): WriteStream {
    const file = this.logFile(name);
    if (existsSync(file) && statSync(file).size > LOG_BYTES) renameSync(file, `${file}.old`);
    return createWriteStream(file, { flags: 'a' });
  }
}

/** What a process inherits: where programs and certificates are, never this machine's other secrets. */
function inherited(): Record<string, string> {
  const kept = ['PATH', 'HOME', 'LANG', 'LC_ALL', 'TMPDIR', 'NODE_EXTRA_CA_CERTS'];
  return Object.fromEntries(kept.flatMap((name) => (process.env[name] ? [[name, process.env[name]]] : [])));
}
