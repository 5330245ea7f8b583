import { and, eq, gt, isNull, or, sql } from 'drizzle-orm';
import { ENGINE_VERSION } from '../../analysis/analyse';
import { connect, type Database } from '../../db/client';
import { keepResult } from '../../db/commands/projection/keep-result';
import { writeProjection, type WantedResult } from '../../db/commands/projection/write-projection';
import { AppError } from '../../db/errors';
import type { StoredFileRef } from '../../db/files/open-stored-file';
import { loadDocument } from '../../db/queries/document/load-document';
import { blockResult, entry, entryText } from '../../db/schema/index';
import { AnalysisWorker } from '../../db/worker/analysis-worker';
import { newAnalysisThread } from '../../db/worker/new-thread';
import { Listener } from '../listener';
import { readDocument } from './read-document';
import { saveSnapshotIfDue } from './snapshot';

export interface ProjectorOptions {
  readonly databaseUrl: string;
  /** Verified bytes of a stored file. */
  readonly openFile: (file: StoredFileRef) => Promise<Buffer>;
  /** For tests: another thread, or a shorter limit. */
  readonly worker?: AnalysisWorker;
}

export interface RunningProjector {
  stop(): Promise<void>;
}

/** How often everything is looked at again, announced or not. */
const SCAN_MS = 2_000;
/** Pause before a file that could not be fetched is asked for again. */
const RETRY_MS = 3_000;

/** Follows committed updates and writes text, blocks and current results of each entry. */
export async function startProjector(options: ProjectorOptions): Promise<RunningProjector> {
  const projector = new Projector(options);
  await projector.start();
  return projector;
}

class Projector implements RunningProjector {
  private readonly db: Database;
  private readonly worker: AnalysisWorker;
  private readonly listener: Listener;
  /** Entries to look at; an entry that changes while it is being read is read again. */
  private readonly due = new Set<string>();
  private readonly computing = new Set<string>();
  private working: Promise<void> | null = null;
  private timer: NodeJS.Timeout | null = null;
  private stopped = false;

  constructor(private readonly options: ProjectorOptions) {
    this.db = connect(options.databaseUrl, { max: 4, name: 'motebook-projector' });
    this.worker = options.worker ?? new AnalysisWorker({ create: () => newAnalysisThread() });
    this.listener = new Listener(
      options.databaseUrl,
      { motebook_update: (payload) => this.mark((JSON.parse(payload) as { entry: string }).entry) },
      () => void this.scan(),
    );
  }

  async start(): Promise<void> {
    await this.listener.start();
    await this.scan();
    this.timer = setInterval(() => void this.scan(), SCAN_MS);
  }

  async stop(): Promise<void> {
    this.stopped = true;
    if (this.timer) clearInterval(this.timer);
    await this.listener.stop();
    await this.worker.stop();
    await this.working;
    await this.db.$client.end();
  }

  private mark(entryId: string): void {
    this.due.add(entryId);
    this.working ??= this.work();
  }

  /** Entries whose log is ahead of what was projected, and blocks that still wait for a result. */
  private async scan(): Promise<void> {
    if (this.stopped) return;
    try {
      const behind = await this.db
        .select({ id: entry.id })
        .from(entry)
        .leftJoin(entryText, eq(entryText.entryId, entry.id))
        .where(
          and(
            gt(entry.headSeq, 0),
            or(
              isNull(entryText.seq),
              gt(entry.headSeq, entryText.seq),
              sql`${entry.epoch} <> ${entryText.epoch}`,
            ),
          ),
        );
      const waiting = await this.db
        .selectDistinct({ id: blockResult.entryId })
        .from(blockResult)
        .where(eq(blockResult.status, 'waiting'));
      for (const { id } of [...behind, ...waiting]) this.mark(id);
    } catch (error) {
      this.complain('looking for entries', error);
    }
  }

  private async work(): Promise<void> {
    try {
      for (const entryId of this.due) {
        this.due.delete(entryId);
        if (this.stopped) return;
        // Trouble with one entry must not hold up the others; the next scan looks at it again.
        await this.project(entryId).catch((error: unknown) => this.complain(`entry ${entryId}`, error));
      }
    } finally {
      this.working = null;
    }
  }

  private async project(entryId: string): Promise<void> {
    const loaded = await loadDocument(this.db, entryId);
    if (!loaded) return;
    const { doc, epoch, seq } = loaded;
    const { plain, blocks } = readDocument(doc);
    await saveSnapshotIfDue(this.db, entryId, loaded);
    doc.destroy();
    const wanted = await writeProjection(this.db, {
      entryId,
      epoch,
      seq,
      plain,
      engine: ENGINE_VERSION,
      blocks: blocks.map((block) => ({
        blockId: block.blockId,
        caption: block.attributes.caption,
        readingIds: block.attributes.readingIds,
        settings: block.settings,
        faulty: block.faulty,
      })),
    });
    if (wanted === null) return;
    await this.announce(entryId, seq);
    // Not awaited: a long analysis must not keep other entries' words from being projected.
    for (const one of wanted) void this.compute(entryId, one);
  }

  private async compute(entryId: string, wanted: WantedResult): Promise<void> {
    if (this.computing.has(wanted.address) || this.stopped) return;
    this.computing.add(wanted.address);
    try {
      const started = performance.now();
      const readings = [];
      for (const { hash, spec, file } of wanted.readings) {
        readings.push({ hash, spec, name: file.name, bytes: await this.options.openFile(file) });
      }
      const outcome = await this.worker
        .run<'analyse'>({ kind: 'analyse', readings, settings: wanted.settings })
        .catch((error: unknown) => {
          // Too long or too large is an outcome of this question; anything else is ours and is tried again.
          if (error instanceof AppError && error.code === 'unreadable') {
            return {
              failed: true as const,
              engine: ENGINE_VERSION,
              code: 'too-much',
              message: error.sentence,
            };
          }
          throw error;
        });
      const milliseconds = Math.round(performance.now() - started);
      await keepResult(this.db, { address: wanted.address, engine: ENGINE_VERSION, outcome, milliseconds });
      this.computing.delete(wanted.address);
      this.mark(entryId);
    } catch (error) {
      this.complain(`a result of entry ${entryId}`, error);
      // The block keeps waiting; the scan brings it back after a pause.
      setTimeout(() => this.computing.delete(wanted.address), RETRY_MS).unref();
    }
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
