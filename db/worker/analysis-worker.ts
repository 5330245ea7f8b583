import type { Worker } from 'node:worker_threads';
import type { WorkerAnswers, WorkerRequest } from '../../analysis/worker/messages';
import { AppError } from '../errors';

interface Job {
  readonly id: number;
  readonly request: WorkerRequest;
  readonly resolve: (answer: never) => void;
  readonly reject: (error: Error) => void;
}

/** What ended a job and its thread; `cause` of the error that the job gets. */
export type WorkerEnd = 'time' | 'memory' | 'crash';

const CRASHED = 'The worker ended unexpectedly. Try again.';

export interface AnalysisWorkerOptions {
  /** Makes the thread; in a bundled program its file has to be named where it is made. */
  readonly create: () => Worker;
  /** A job that takes longer is ended, with its thread. */
  readonly limitMs?: number;
  /** More waiting jobs than this are refused. */
  readonly queue?: number;
}

/**
 * One worker thread that computes one thing at a time, so that reading and analysing never hold up a page or a socket. A
 * job that runs too long, or that brings the thread down, fails with a sentence; the next one gets a fresh thread.
 */
export class AnalysisWorker {
  private worker: Worker | null = null;
  private running: { job: Job; timer: NodeJS.Timeout } | null = null;
  private readonly waiting: Job[] = [];
  private lastId = 0;
  private readonly limitMs: number;
  private readonly queue: number;

  constructor(private readonly options: AnalysisWorkerOptions) {
    this.limitMs = options.limitMs ?? 60_000;
    this.queue = options.queue ?? 50;
  }

  /**
   * @throws AppError slow-down - too much waits; unreadable - it took too long or too much memory, or the thread died.
   * @throws Error - the question itself threw.
   */
  run<K extends WorkerRequest['kind']>(
    request: Extract<WorkerRequest, { kind: K }>,
  ): Promise<WorkerAnswers[K]> {
    if (this.waiting.length >= this.queue) {
      return Promise.reject(
        new AppError('slow-down', {
          sentence: 'Many files are being read at the moment. Try again in a minute.',
        }),
      );
    }
    return new Promise((resolve, reject) => {
      this.waiting.push({
        id: (this.lastId += 1),
        request,
        resolve: resolve as (answer: never) => void,
        reject,
      });
      this.next();
    });
  }

  async stop(): Promise<void> {
    const gone = new AppError('storage-down', { sentence: 'The server is being stopped.' });
    for (const job of this.waiting.splice(0)) job.reject(gone);
    if (this.running) {
      clearTimeout(this.running.timer);
      this.running.job.reject(gone);
      this.running = null;
    }
    const { worker } = this;
    this.worker = null;
    await worker?.terminate();
  }

  private next(): void {
    if (this.running) return;
    const job = this.waiting.shift();
    if (!job) return;
    const worker = (this.worker ??= this.begin());
    const seconds = Math.round(this.limitMs / 1000);
    const timer = setTimeout(() => {
      this.fail(
        `This took longer than ${seconds} seconds and was stopped. Leave out tracks, or split the file.`,
        'time',
      );
    }, this.limitMs);
    this.running = { job, timer };
    worker.ref();
    worker.postMessage({ id: job.id, request: job.request });
  }

  private begin(): Worker {
    const worker = this.options.create();
    worker.on('message', ({ id, answer, error }: { id: number; answer?: never; error?: string }) => {
      if (this.running?.job.id !== id) return;
      const { job, timer } = this.running;
      clearTimeout(timer);
      this.running = null;
      // An idle thread must not keep a finished process alive.
      worker.unref();
      if (error === undefined) job.resolve(answer as never);
      else job.reject(new Error(`worker: ${error}`));
      this.next();
    });
    worker.on('error', (error: NodeJS.ErrnoException) => {
      if (this.worker !== worker) return;
      console.error(`analysis worker: ${error.message}`);
      if (error.code === 'ERR_WORKER_OUT_OF_MEMORY') {
        this.fail(
          'This file needs more memory than a worker has. Leave out tracks, or split the file.',
          'memory',
        );
      } else this.fail(CRASHED, 'crash');
    });
    worker.on('exit', () => {
      if (this.worker === worker) this.fail(CRASHED, 'crash');
    });
    return worker;
  }

  /** Ends the thread, tells whoever waited for it, and goes on with a fresh one. */
  private fail(sentence: string, cause: WorkerEnd): void {
    const { worker, running } = this;
    this.worker = null;
    this.running = null;
    void worker?.terminate();
    if (running) {
      clearTimeout(running.timer);
      running.job.reject(new AppError('unreadable', { sentence, cause }));
    }
    this.next();
  }
}
