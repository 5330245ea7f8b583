import { spawn, type ChildProcess } from 'node:child_process';
import { closeSync, mkdirSync, writeSync } from 'node:fs';
import path from 'node:path';
import { openLog } from './log-file';
import { sendSignal } from './send-signal';

export interface ChildPlan {
  readonly name: string;
  /** Arguments of node: the program and what follows. */
  readonly args: readonly string[];
  readonly environment: Readonly<Record<string, string>>;
}

const SHORTEST_PAUSE_MS = 200;
const LONGEST_PAUSE_MS = 5_000;
/** A process that lived this long had a good start: its next pause is short again. */
const GOOD_START_MS = 30_000;
const STOP_MS = 10_000;

/**
 * Keeps a set of processes running: each has a log, is started again when it dies (with a growing pause), and ends with
 * this process, however this process ends.
 */
export class Children {
  private readonly running = new Map<string, ChildProcess>();
  private readonly pauses = new Map<string, number>();
  private stopping = false;
  /** Called whenever the process ids have changed. */
  onChange: () => void = () => undefined;
  /** Called when a process has died several times in a row soon after its start; it is started again all the same. */
  onHopeless: (complaint: string) => void = (complaint) => this.say(complaint);

  constructor(
    private readonly project: string,
    private readonly logFolder: string,
    private readonly say: (line: string) => void,
  ) {
    mkdirSync(logFolder, { recursive: true, mode: 0o700 });
  }

  /** Process ids by name, for the note that a later start reads. */
  pids(): Record<string, number> {
    return Object.fromEntries([...this.running].map(([name, child]) => [name, child.pid ?? 0]));
  }

  start(plan: ChildPlan): void {
    if (this.stopping) return;
    const file = path.join(this.logFolder, `${plan.name}.log`);
    const log = openLog(file);
    const started = Date.now();
    const child = spawnNode(this.project, plan);
    child.stdout?.on('data', (text: Buffer) => writeSync(log, text));
    child.stderr?.on('data', (text: Buffer) => {
      writeSync(log, text);
      process.stderr.write(text.toString('utf8').replace(/^(?=.)/gm, `[${plan.name}] `));
    });
    child.on('error', (error) => this.say(`${plan.name} could not be started: ${error.message}`));
    child.on('exit', (code, signal) => {
      this.running.delete(plan.name);
      endGroup(child.pid);
      if (this.stopping) return;
      const pause = this.nextPause(plan.name, Date.now() - started);
      const how = `${plan.name} ended (${signal ?? `code ${code}`})`;
      if (pause === LONGEST_PAUSE_MS) this.onHopeless(`${how} again and again. Its log: ${file}`);
      else this.say(`${how}; starting it again. Its log: ${file}`);
      setTimeout(() => this.start(plan), pause);
    });
    // Comes after the last line it printed, unlike "exit".
    child.on('close', () => closeSync(log));
    this.running.set(plan.name, child);
    this.onChange();
  }

  /** Ends the processes one after the other, the last started first: whoever uses a service ends before it. */
  async stop(): Promise<void> {
    this.stopping = true;
    for (const child of [...this.running.values()].reverse()) await end(child);
  }

  private nextPause(name: string, livedMs: number): number {
    const before = livedMs > GOOD_START_MS ? 0 : (this.pauses.get(name) ?? 0);
    const pause = Math.min(LONGEST_PAUSE_MS, Math.max(SHORTEST_PAUSE_MS, before * 2));
    this.pauses.set(name, pause);
    return pause;
  }
}

/** Starts node with a channel to this process; a session of its own keeps a Ctrl-C in the terminal from reaching it. */
export function spawnNode(project: string, plan: ChildPlan): ChildProcess {
  return spawn(
    process.execPath,
    ['--import', path.join(project, 'db/setup/end-with-parent.mjs'), ...plan.args],
    {
      cwd: project,
      env: {
        ...inherited(),
        ...plan.environment,
        MOTEBOOK_SUPERVISOR: String(process.pid),
      } as unknown as NodeJS.ProcessEnv,
      stdio: ['ignore', 'pipe', 'pipe', 'ipc'],
      detached: true,
    },
  );
}

/** Asks a process to end, waits, and after ten seconds insists. */
export async function end(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null || child.pid === undefined) return;
  const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()));
  child.kill('SIGTERM');
  const insist = setTimeout(() => child.kill('SIGKILL'), STOP_MS);
  await ended;
  clearTimeout(insist);
}

/** Ends what a process that was killed has left behind in its group; a port that such a rest holds stays busy for ever. */
export function endGroup(leader: number | undefined): void {
  if (leader !== undefined) sendSignal(-leader, 'SIGKILL');
}

/** What a process inherits: where programs and certificates are, never this machine's other secrets. */
function inherited(): Record<string, string> {
  const kept = ['PATH', 'HOME', 'LANG', 'LC_ALL', 'TMPDIR', 'NODE_EXTRA_CA_CERTS'];
  return Object.fromEntries(kept.flatMap((name) => (process.env[name] ? [[name, process.env[name]]] : [])));
}
