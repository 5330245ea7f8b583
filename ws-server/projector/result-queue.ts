import { ENGINE_VERSION } from '../../analysis/analyse';
import type { AnalysisFailure, AnalysisResult } from '../../analysis/types';
import type { Database } from '../../db/client';
import type { Trouble, WantedResult } from '../../db/commands/projection/describe-blocks';
import { isResultKept, keepResult } from '../../db/commands/projection/keep-result';
import { AppError } from '../../db/errors';
import type { StoredFileRef } from '../../db/files/open-stored-file';
import type { AnalysisWorker } from '../../db/worker/analysis-worker';
import { troubleFor, type Setback } from './setbacks';

export interface ResultQueueOptions {
  readonly db: Database;
  readonly worker: AnalysisWorker;
  /** Verified bytes of a stored file. */
  readonly openFile: (file: StoredFileRef) => Promise<Buffer>;
  /** The answer to a question of these entries has come, or the reason why there is none has changed. */
  readonly onNews: (entryIds: readonly string[]) => void;
  readonly complain: (what: string, error: unknown) => void;
  /** First pause before a question is tried again, ms; each further one is twice as long. */
  readonly firstPauseMs?: number;
}

/** One question, whichever entries ask it. */
interface Job {
  readonly wanted: WantedResult;
  readonly entries: Set<string>;
  phase: 'queued' | 'running' | 'resting' | 'given-up';
  trouble: Trouble | null;
  attempts: number;
  timer: NodeJS.Timeout | null;
}

/** Two, so that a file that is slow to come does not hold up the others; the worker computes one at a time anyway. */
const LANES = 2;
const FIRST_PAUSE_MS = 3_000;
const LONGEST_PAUSE_MS = 60_000;
const STOP_MS = 3_000;

/**
 * Computes the results that blocks name and nobody has computed yet: fetches the files, asks the worker, keeps the answer
 * at its address. A question asked by several blocks or entries is computed once. A question that nobody asks any more is
 * forgotten, unless it is being computed. What mends itself (the file service is away) is tried again after a pause.
 */
export class ResultQueue {
  private readonly jobs = new Map<string, Job>();
  private readonly lanes = new Set<Promise<void>>();
  private stopped = false;

  constructor(private readonly options: ResultQueueOptions) {}

  /** Tells which missing results an entry's blocks name now; replaces what it named before. */
  want(entryId: string, wanted: readonly WantedResult[]): void {
    const addresses = new Set(wanted.map((one) => one.address));
    for (const [address, job] of this.jobs) {
      if (!addresses.has(address) && job.entries.delete(entryId)) this.forgetIfUnasked(address, job);
    }
    for (const one of wanted) {
      const job = this.jobs.get(one.address);
      if (job) job.entries.add(entryId);
      else {
        this.jobs.set(one.address, {
          wanted: one,
          entries: new Set([entryId]),
          phase: 'queued',
          trouble: null,
          attempts: 0,
          timer: null,
        });
      }
    }
    this.fill();
  }

  /** Why there is no result at an address yet; null when nothing is wrong. */
  troubleOf(address: string): Trouble | null {
    return this.jobs.get(address)?.trouble ?? null;
  }

  /** Whether something that this entry asks for is on its way, so that nothing needs to be done about it. */
  isBusyFor(entryId: string): boolean {
    return [...this.jobs.values()].some((job) => job.phase !== 'given-up' && job.entries.has(entryId));
  }

  /** Tries again at once what rests after a setback: what set it back may be mended. */
  tryNow(): void {
    for (const job of this.jobs.values()) if (job.phase === 'resting') this.requeue(job);
    this.fill();
  }

  /** Takes up nothing more, and waits a little for what is under way: leaving it undone is safe, the next start does it. */
  async stop(): Promise<void> {
    this.stopped = true;
    for (const job of this.jobs.values()) if (job.timer) clearTimeout(job.timer);
    await this.options.worker.stop();
    let timer: NodeJS.Timeout | undefined;
    const longEnough = new Promise<void>((resolve) => (timer = setTimeout(resolve, STOP_MS)));
    await Promise.race([Promise.allSettled(this.lanes), longEnough]);
    clearTimeout(timer);
  }

  private fill(): void {
    for (const job of this.jobs.values()) {
      if (this.stopped || this.lanes.size >= LANES) return;
      if (job.phase !== 'queued') continue;
      const lane: Promise<void> = this.run(job).finally(() => {
        this.lanes.delete(lane);
        this.fill();
      });
      this.lanes.add(lane);
    }
  }

  private async run(job: Job): Promise<void> {
    job.phase = 'running';
    job.attempts += 1;
    const { address } = job.wanted;
    try {
      // An entry that was read just before another's answer was kept asks for what is there by now.
      if (!(await isResultKept(this.options.db, address))) await this.answer(job.wanted);
      this.jobs.delete(address);
      this.options.onNews([...job.entries]);
    } catch (error) {
      if (this.stopped) return;
      this.options.complain(`result ${address.slice(0, 12)}`, error);
      this.setBack(job, troubleFor(error, job.attempts));
    }
  }

  private async answer(wanted: WantedResult): Promise<void> {
    const started = performance.now();
    const outcome = await this.compute(wanted);
    const milliseconds = Math.round(performance.now() - started);
    await keepResult(this.options.db, {
      address: wanted.address,
      engine: ENGINE_VERSION,
      outcome,
      milliseconds,
    });
  }

  private async compute(wanted: WantedResult): Promise<AnalysisResult | AnalysisFailure> {
    const readings = [];
    for (const { hash, spec, file } of wanted.readings) {
      readings.push({ hash, spec, name: file.name, bytes: await this.options.openFile(file) });
    }
    if (this.stopped) throw new AppError('storage-down');
    return this.options.worker.run<'analyse'>({ kind: 'analyse', readings, settings: wanted.settings });
  }

  private setBack(job: Job, { trouble, again }: Setback): void {
    const before = job.trouble;
    job.trouble = trouble;
    job.phase = again ? 'resting' : 'given-up';
    if (again) {
      const first = this.options.firstPauseMs ?? FIRST_PAUSE_MS;
      const pause = Math.min(LONGEST_PAUSE_MS, first * 2 ** (job.attempts - 1));
      job.timer = setTimeout(() => {
        this.requeue(job);
        this.fill();
      }, pause);
    }
    if (before?.message !== trouble.message || before.status !== trouble.status) {
      this.options.onNews([...job.entries]);
    }
    this.forgetIfUnasked(job.wanted.address, job);
  }

  private requeue(job: Job): void {
    if (job.timer) clearTimeout(job.timer);
    job.timer = null;
    job.phase = 'queued';
  }

  private forgetIfUnasked(address: string, job: Job): void {
    if (job.entries.size > 0 || job.phase === 'running') return;
    if (job.timer) clearTimeout(job.timer);
    this.jobs.delete(address);
  }
}
