import { sql } from 'drizzle-orm';
import { ENGINE_VERSION } from '../../analysis/analyse';
import { connect, type Database } from '../../db/client';
import { writeProjection } from '../../db/commands/projection/write-projection';
import type { StoredFileRef } from '../../db/files/open-stored-file';
import { isDatabaseAway } from '../../db/is-database-away';
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
/** While the database is away: twice as long from time to time, up to this. Its first connection that is back ends the wait. */
const LONGEST_SCAN_MS = 30_000;

/**
 * Follows committed updates and writes text, blocks and current results of each entry (integrity rule 2.2a). It owns none
 * of the record: whatever it leaves undone, the next one finds and does. A database that goes away later is waited for.
 * @throws Error when the database cannot be reached now; nothing is left running.
 */
export async function startProjector(options: ProjectorOptions): Promise<RunningProjector> {
  const projector = new Projector(options);
  try {
    await projector.start();
  } catch (error) {
    await projector.stop();
    throw error;
  }
  return projector;
}

class Projector implements RunningProjector {
  private readonly db: Database;
  private readonly results: ResultQueue;
  private readonly listener: Listener;
  private readonly due = new DueEntries();
  private working: Promise<void> | null = null;
  private wake: NodeJS.Timeout | null = null;
  private scanning: Promise<void> | null = null;
  private nextScan: NodeJS.Timeout | null = null;
  /** Scans in a row that found the database away. */
  private missed = 0;
  /** Nothing is read from a database that is away; the scan finds out when it is back. */
  private away = false;
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
      () => {
        this.missed = 0;
        void this.scan();
      },
    );
  }

  async start(): Promise<void> {
    await this.listener.start();
    for (const entryId of await findToAskAnew(this.db)) this.mark(entryId);
    await this.scan();
  }

  async stop(): Promise<void> {
    this.stopped = true;
    if (this.nextScan) clearTimeout(this.nextScan);
    if (this.wake) clearTimeout(this.wake);
    await this.listener.stop();
    await this.results.stop();
    await this.working;
    await this.scanning;
    await this.db.$client.end();
  }

  private mark(entryId: string): void {
    this.due.mark(entryId);
    this.work();
  }

  /** Reads marked entries one after the other, now those that may be read now, the others when they may. */
  private work(): void {
    if (this.stopped || this.away || this.working) return;
    if (this.wake) clearTimeout(this.wake);
    this.wake = null;
    this.working = this.projectDue().finally(() => {
      this.working = null;
      const next = this.due.nextInMs();
      if (next !== null && !this.stopped && !this.away) this.wake = setTimeout(() => this.work(), next);
    });
  }

  /** Looks at everything, one look at a time, and again after a while. */
  private scan(): Promise<void> {
    if (this.stopped || this.scanning) return this.scanning ?? Promise.resolve();
    if (this.nextScan) clearTimeout(this.nextScan);
    this.scanning = this.look().finally(() => {
      this.scanning = null;
      const pause = Math.min(LONGEST_SCAN_MS, SCAN_MS * 2 ** this.missed);
      if (!this.stopped) this.nextScan = setTimeout(() => void this.scan(), pause);
    });
    return this.scanning;
  }

  private async look(): Promise<void> {
    try {
      const behind = await findBehind(this.db);
      const waiting = await findWaiting(this.db);
      this.found();
      for (const entryId of behind) this.mark(entryId);
      for (const entryId of waiting) if (!this.results.isBusyFor(entryId)) this.mark(entryId);
    } catch (error) {
      if (!this.lost(error)) this.complain('looking for entries', error);
      else this.missed += 1;
    }
  }

  /** @returns whether the fault is that the database is away; told once, however much fails because of it. */
  private lost(error: unknown): boolean {
    if (!isDatabaseAway(error)) return false;
    if (!this.away) this.complain('the database is away', error);
    this.away = true;
    return true;
  }

  private found(): void {
    this.missed = 0;
    if (!this.away) return;
    this.away = false;
    if (!this.stopped) console.log('projector, the database is back');
    this.due.forgetFaults();
    this.results.tryNow();
    this.work();
  }

  private async projectDue(): Promise<void> {
    for (let entryId = this.due.take(); entryId !== null; entryId = this.due.take()) {
      let fault = false;
      try {
        await this.project(entryId);
      } catch (error) {
        fault = true;
        if (!this.lost(error)) this.complain(`entry ${entryId}`, error);
      }
      this.due.done(entryId, fault);
      if (this.stopped || this.away) return;
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
