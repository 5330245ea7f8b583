import path from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { Children, type ChildPlan } from './children';
import type { Cluster } from './cluster';
import { removeRunNote, writeRunNote } from './run-note';

/** Pause before PostgreSQL is started again, so that one that dies at once does not keep the machine busy. */
const DATABASE_PAUSE_MS = 300;

/** Everything that one start keeps running, and takes down again in order: processes first, then the database. */
export class Supervisor {
  private readonly ending = new AbortController();
  private readonly children: Children;
  private cluster: Cluster | null = null;
  private isUp = false;

  constructor(
    project: string,
    private readonly folder: string,
    private readonly product: string,
    private readonly say: (line: string) => void,
  ) {
    this.children = new Children(project, path.join(folder, 'logs'), say);
    this.children.onChange = () => this.writeNote();
    // A start that cannot succeed ends; what has been up goes on trying.
    this.children.onHopeless = (complaint) =>
      this.isUp ? say(complaint) : this.ending.abort(new Error(complaint));
    this.writeNote();
  }

  /** Aborted as soon as everything is to end. */
  get signal(): AbortSignal {
    return this.ending.signal;
  }

  /**
   * Brings everything up, keeps it running until Ctrl-C, a polite kill or the end of start.mjs, and takes it down. Nothing
   * stays behind when bringing up does not succeed.
   * @throws what `bringUp` threw, or what made the installation unable to go on.
   */
  async run(bringUp: (supervisor: Supervisor) => Promise<void>): Promise<void> {
    const ended = new Promise<void>((resolve) => this.signal.addEventListener('abort', () => resolve()));
    for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const)
      process.on(signal, () => this.ending.abort(ASKED));
    process.on('disconnect', () => this.ending.abort(ASKED));
    // start.mjs may be gone before the line above was reached; undefined when there never was a channel.
    if (process.connected === false) this.ending.abort(ASKED);
    try {
      this.signal.throwIfAborted();
      const up = bringUp(this);
      // Whoever asks to end does not wait for what is still being brought up; that fails as its ground goes.
      await Promise.race([up, ended]);
      this.isUp = true;
      await ended;
    } catch (error) {
      if (this.signal.reason !== ASKED) throw error;
    } finally {
      if (this.signal.aborted) this.say('Stopping …');
      await this.children.stop();
      await this.cluster?.stop();
      removeRunNote(this.folder);
    }
    if (this.signal.reason !== ASKED) throw this.signal.reason;
  }

  startChildren(plans: readonly ChildPlan[]): void {
    for (const plan of plans) this.children.start(plan);
  }

  /** Takes charge of a running cluster: when its server is lost, it is started again. */
  adopt(cluster: Cluster): void {
    this.cluster = cluster;
    cluster.server.onLost = () => void this.restart(cluster);
  }

  private async restart(cluster: Cluster): Promise<void> {
    if (this.signal.aborted) return;
    this.say('PostgreSQL ended; starting it again.');
    try {
      await pause(DATABASE_PAUSE_MS);
      await cluster.start();
    } catch (error) {
      this.ending.abort(error);
    }
    if (this.signal.aborted) await cluster.stop();
  }

  private writeNote(): void {
    writeRunNote(this.folder, {
      supervisor: process.pid,
      product: this.product,
      children: this.children.pids(),
    });
  }
}

const ASKED = Symbol('asked to end');
