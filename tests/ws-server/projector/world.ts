import { createHash, randomUUID } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { and, eq, sql } from 'drizzle-orm';
import * as Y from 'yjs';
import { inspectFile } from '../../../analysis/intake/inspect-file';
import { readTrajectories } from '../../../analysis/intake/read-trajectories';
import type { Database } from '../../../db/client';
import { toShared, type DocumentNode } from '../../../db/commands/entry/document-json';
import { seedEntry } from '../../../db/commands/entry/write-document';
import { makeReading } from '../../../db/commands/file/make-reading';
import { BLOCK_DEFAULTS } from '../../../db/inputs/block-settings';
import type { Actor } from '../../../db/policies/may';
import { loadDocument } from '../../../db/queries/document/load-document';
import { blockResult, entryText, result } from '../../../db/schema/index';
import { FRAGMENT } from '../../../editor/schema/index';
import {
  startProjector,
  type ProjectorOptions,
  type RunningProjector,
} from '../../../ws-server/projector/projector';
import { until } from '../../helpers/collab-clients';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { makeAttachment, makeEntry, makeNotebook, makePerson } from '../../helpers/factories';

const GOLDEN = new URL('../../fixtures/golden/', import.meta.url);
export const golden = (name: string): Buffer => readFileSync(new URL(name, GOLDEN));
export const sha256 = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex');

/** A database with one author, and files that a projector is given without any file service. */
export class World {
  readonly files = new Map<string, Buffer>();
  private readonly projectors = new Set<RunningProjector>();

  private constructor(
    readonly database: TestDatabase,
    readonly author: Actor,
    readonly notebookId: string,
  ) {}

  static async create(): Promise<World> {
    const database = await createTestDatabase();
    const author = await makePerson(database.app);
    return new World(database, author, (await makeNotebook(database.app, author)).id);
  }

  get db() {
    return this.database.app;
  }

  async start(options: Partial<ProjectorOptions> = {}): Promise<RunningProjector> {
    const projector = await startProjector({
      databaseUrl: this.database.urls.motebook_app,
      openFile: (file) => this.openFile(file),
      firstPauseMs: 50,
      ...options,
    });
    this.projectors.add(projector);
    return {
      stop: () => {
        this.projectors.delete(projector);
        return projector.stop();
      },
    };
  }

  async end(): Promise<void> {
    for (const projector of this.projectors) await projector.stop();
    await this.database.drop();
  }

  openFile(file: { sha256: string }): Promise<Buffer> {
    const bytes = this.files.get(file.sha256);
    return bytes ? Promise.resolve(bytes) : Promise.reject(new Error('no such file in this test'));
  }

  async newEntry(): Promise<string> {
    const entryId = await makeEntry(this.db, this.notebookId, this.author);
    await this.db.transaction((tx) => seedEntry(tx, { entryId, actor: this.author }));
    return entryId;
  }

  /** Attaches a file, keeps it where projectors find it, and confirms how it is read. @returns id of the reading. */
  async addReading(
    entryId: string,
    name: string,
    given: { bytes?: Buffer; storageKey?: string; frameInterval?: string } = {},
  ): Promise<string> {
    const bytes = given.bytes ?? golden(name);
    this.files.set(sha256(bytes), bytes);
    const attachmentId = await makeAttachment(this.db, entryId, this.author, {
      name,
      sha256: sha256(bytes),
      bytes: bytes.length,
      ...(given.storageKey === undefined ? {} : { storageKey: given.storageKey }),
    });
    const inspection = inspectFile(bytes, name);
    if (inspection.failed) throw new Error(inspection.message);
    const spec = { ...inspection.spec, frameInterval: given.frameInterval ?? inspection.spec.frameInterval };
    const read = readTrajectories(bytes, spec);
    if (read.failed) throw new Error(read.message);
    const { readingId } = await makeReading(this.db, this.author, {
      attachmentId,
      spec,
      summary: read.summary,
      problems: read.problemCount,
    });
    return readingId;
  }

  edit(entryId: string, change: (root: Y.XmlFragment) => void): Promise<void> {
    return editDocument(this.db, this.author, entryId, change);
  }

  append(entryId: string, ...nodes: DocumentNode[]): Promise<void> {
    return this.edit(entryId, (root) => root.insert(root.length, nodes.map(toShared)));
  }

  /** Writes one attribute of the block with this id, as the page does for one setting. */
  set(entryId: string, blockId: string, name: string, value: unknown): Promise<void> {
    return this.edit(entryId, (root) => blockIn(root, blockId).setAttribute(name, value as string));
  }

  remove(entryId: string, blockId: string): Promise<void> {
    return this.edit(entryId, (root) => {
      root.delete(root.toArray().indexOf(blockIn(root, blockId)), 1);
    });
  }

  async blocks(entryId: string) {
    const rows = await this.db.select().from(blockResult).where(eq(blockResult.entryId, entryId));
    return rows.sort((a, b) => a.position - b.position);
  }

  async text(entryId: string): Promise<string | undefined> {
    const [row] = await this.db.select().from(entryText).where(eq(entryText.entryId, entryId));
    return row?.plain;
  }

  async results(): Promise<number> {
    return (await this.db.select({ address: result.address }).from(result)).length;
  }

  /** Waits until so many blocks of the entry have this status. */
  async wait(entryId: string, status: 'empty' | 'waiting' | 'done' | 'failed', count = 1): Promise<void> {
    await until(`${count} of the entry's blocks are ${status}`, async () => {
      const rows = await this.db
        .select({ id: blockResult.blockId })
        .from(blockResult)
        .where(and(eq(blockResult.entryId, entryId), eq(blockResult.status, status)));
      return rows.length === count;
    });
  }
}

/** One committed update, as a browser of this person would make it. */
export async function editDocument(
  db: Database,
  { personId }: Actor,
  entryId: string,
  change: (root: Y.XmlFragment) => void,
): Promise<void> {
  const loaded = await loadDocument(db, entryId);
  if (!loaded) throw new Error('no such entry');
  const { doc, epoch, lock } = loaded;
  const before = Y.encodeStateVector(doc);
  doc.transact(() => change(doc.getXmlFragment(FRAGMENT)));
  const payload = Buffer.from(Y.encodeStateAsUpdate(doc, before));
  await db.execute(sql`SELECT register_client(${entryId}, ${epoch}, ${doc.clientID}, ${personId})`);
  const { rows } = await db.execute<{ refusal: string | null }>(sql`
    SELECT refusal FROM append_updates(${entryId}, ${lock}, ${epoch}, ${personId}, NULL,
      ${randomUUID()}, ARRAY[${doc.clientID}]::bigint[], ARRAY[${payload}]::bytea[])`);
  if (rows[0]?.refusal) throw new Error(`refused: ${rows[0].refusal}`);
}

function blockIn(root: Y.XmlFragment, blockId: string): Y.XmlElement {
  const found = root
    .toArray()
    .find((node) => node instanceof Y.XmlElement && node.getAttribute('blockId') === blockId);
  if (!found) throw new Error(`no block ${blockId}`);
  return found as Y.XmlElement;
}

export const paragraph = (text: string): DocumentNode => ({
  type: 'paragraph',
  content: [{ type: 'text', text }],
});

export const block = (attrs: Record<string, unknown>) => ({
  type: 'diffusionBlock',
  attrs: { ...BLOCK_DEFAULTS, blockId: randomUUID(), ...attrs },
});
