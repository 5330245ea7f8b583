import { sql } from 'drizzle-orm';
import { ENGINE_VERSION } from '../../analysis/analyse';
import { connect, type Database } from '../../db/client';
import { writeProjection } from '../../db/commands/projection/write-projection';
import type { StoredFileRef } from '../../db/files/open-stored-file';
import { loadDocument } from '../../db/queries/document/load-document';
import { AnalysisWorker } from '../../db/worker/analysis-worker';
import { newAnalysisThread } from '../../db/worker/new-thread';
import { Listener } from '../listener';
import { DueEntries } from './due-entries';
import { findBehind, findToAskAnew, findWaiting } from './find-due';
import { readDocument } from './read-document';
import { ResultQueue } from './result-queue';
import { keepSnapshotWhenDue } from './snapshot';

export interface ProjectorOptions {
  readonly databaseUrl: string;
  /** Verified bytes of a stored file. */
  readonly openFile: (file: StoredFileRef) => Promise<Buffer>;
  /** For tests: another thread, or a shorter limit. */
  readonly worker?: AnalysisWorker;
  /** For tests: the pause before a result is tried again, ms. */
  readonly firstPauseMs?: number;
}

export interface RunningProjector {
  /** Finishes what is being written, leaves the rest for the next start. */
  stop(): Promise<void>;
}

/** How often everything is looked at again, announced or not. */
const SCAN_MS = 2_000;

/**
 * Follows committed updates and writes text, blocks and current results of each entry (integrity rule 2.2a). It owns none
 * of the record: whatever it leaves undone, the next one finds and does. @throws Error when the database cannot be reached.
 */
export async function startProjector(options: ProjectorOptions): Promise<RunningProjector> {
  const projector = new Projector(options);
  await projector.start();
  return projector;
}

class Projector implements RunningProjector {
  private readonly db: Database;
  private readonly results: ResultQueue;
  private readonly listener: Listener;
  private readonly due = new DueEntries();
  private working: Promise<void> | null = null;
  private wake: NodeJS.Timeout | null = null;
  private scanning: NodeJS.Timeout | null = null;
  private stopped = false;

  constructor(options: ProjectorOptions) {
    this.db = connect(options.databaseUrl, { max: 4, name: 'motebook-projector' });
    this.results = new ResultQueue({
      db: this.db,
      worker: options.worker ?? new AnalysisWorker({ create: () => newAnalysisThread() }),
      openFile: options.openFile,
      onNews: (entryIds) => entryIds.forEach((entryId) => this.mark(entryId)),
      complain: (what, error) => this.complain(what, error),
      firstPauseMs: options.firstPauseMs,
    });
    this.listener = new Listener(
      options.databaseUrl,
      { motebook_update: (payload) => this.mark((JSON.parse(payload) as { entry: string }).entry) },
      // Whatever was announced while nobody listened is found by looking.
      () => void this.scan(),
    );
  }

  async start(): Promise<void> {
    await this.listener.start();
    for (const entryId of await findToAskAnew(this.db)) this.mark(entryId);
    await this.scan();
    this.scanning = setInterval(() => void this.scan(), SCAN_MS);
  }

  async stop(): Promise<void> {
    this.stopped = true;
    if (this.scanning) clearInterval(this.scanning);
    if (this.wake) clearTimeout(this.wake);
    await this.listener.stop();
    await this.results.stop();
    await this.working;
    await this.db.$client.end();
  }

  private mark(entryId: string): void {
    this.due.mark(entryId);
    this.work();
  }

  /** Reads marked entries one after the other, now those that may be read now, the others when they may. */
  private work(): void {
    if (this.stopped || this.working) return;
    if (this.wake) clearTimeout(this.wake);
    this.wake = null;
    this.working = this.projectDue().finally(() => {
      this.working = null;
      const next = this.due.nextInMs();
      if (next !== null && !this.stopped) this.wake = setTimeout(() => this.work(), next);
    });
  }

  private async scan(): Promise<void> {
    if (this.stopped) return;
    try {
      for (const entryId of await findBehind(this.db)) this.mark(entryId);
      for (const entryId of await findWaiting(this.db)) {
        if (!this.results.isBusyFor(entryId)) this.mark(entryId);
      }
    } catch (error) {
      this.complain('looking for entries', error);
    }
  }

  private async projectDue(): Promise<void> {
    for (let entryId = this.due.take(); entryId !== null; entryId = this.due.take()) {
      let fault = false;
      try {
        await this.project(entryId);
      } catch (error) {
        fault = true;
        this.complain(`entry ${entryId}`, error);
      }
      this.due.done(entryId, fault);
      if (this.stopped) return;
    }
  }

  private async project(entryId: string): Promise<void> {
    const loaded = await loadDocument(this.db, entryId);
    if (!loaded) return;
    const doc = await keepSnapshotWhenDue(this.db, entryId, loaded, (fault) =>
      this.complain(`entry ${entryId}`, new Error(fault)),
    );
    const { plain, blocks } = readDocument(doc);
    doc.destroy();
    const written = await writeProjection(
      this.db,
      {
        entryId,
        epoch: loaded.epoch,
        seq: loaded.seq,
        plain,
        engine: ENGINE_VERSION,
        blocks: blocks.map(({ blockId, attributes, settings, faulty }) => ({
          blockId,
          caption: attributes.caption,
          readingIds: attributes.readingIds,
          settings,
          faulty,
        })),
      },
      (address) => this.results.troubleOf(address),
    );
    if (written === null) return;
    this.results.want(entryId, written.wanted);
    // Open pages ask again for the blocks when they hear this; words alone are no news to them.
    if (written.changed) await this.announce(entryId, loaded.seq);
  }

  private async announce(entryId: string, seq: number): Promise<void> {
    await this.db.execute(
      sql`SELECT pg_notify('motebook_projected', ${JSON.stringify({ entry: entryId, seq })})`,
    );
  }

  private complain(what: string, error: unknown): void {
    if (!this.stopped) console.error(`projector, ${what}: ${(error as Error).message}`);
  }
}
