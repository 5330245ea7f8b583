import { createHash, randomUUID } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { analyse } from '../../analysis/analyse';
import { inspectFile } from '../../analysis/intake/inspect-file';
import { readTrajectories } from '../../analysis/intake/read-trajectories';
import { makeReading } from '../../db/commands/file/make-reading';
import { appendServerEdit, seedEntry } from '../../db/commands/entry/write-document';
import { BLOCK_DEFAULTS, settingsOf } from '../../db/inputs/block-settings';
import type { Actor } from '../../db/policies/may';
import { listBlocks } from '../../db/queries/block/list-blocks';
import { blockResult, entryText, result } from '../../db/schema/index';
import { AnalysisWorker } from '../../db/worker/analysis-worker';
import { newAnalysisThread } from '../../db/worker/new-thread';
import { startProjector, type RunningProjector } from '../../ws-server/projector/projector';
import { until } from '../helpers/collab-clients';
import { createTestDatabase, type TestDatabase } from '../helpers/database';
import { makeAttachment, makeEntry, makeNotebook, makePerson } from '../helpers/factories';

const GOLDEN = new URL('../fixtures/golden/', import.meta.url);
const files = new Map<string, Buffer>();
const openFile = (file: { sha256: string }) => {
  const bytes = files.get(file.sha256);
  return bytes ? Promise.resolve(bytes) : Promise.reject(new Error('the file service is away'));
};
let database: TestDatabase;
let projector: RunningProjector;
let author: Actor;
let notebookId: string;

beforeAll(async () => {
  database = await createTestDatabase();
  author = await makePerson(database.app);
  notebookId = (await makeNotebook(database.app, author)).id;
  projector = await startProjector({ databaseUrl: database.urls.motebook_app, openFile });
});
afterAll(async () => {
  await projector.stop();
  await database.drop();
});

async function newEntry(): Promise<string> {
  const entryId = await makeEntry(database.app, notebookId, author);
  await database.app.transaction((tx) => seedEntry(tx, { entryId, actor: author }));
  return entryId;
}

async function addReading(entryId: string, name: string): Promise<string> {
  const bytes = readFileSync(new URL(name, GOLDEN));
  const sha256 = createHash('sha256').update(bytes).digest('hex');
  files.set(sha256, bytes);
  const attachmentId = await makeAttachment(database.app, entryId, author, {
    name,
    sha256,
    bytes: bytes.length,
  });
  const inspection = inspectFile(bytes, name);
  if (inspection.failed) throw new Error(inspection.message);
  const read = readTrajectories(bytes, inspection.spec);
  if (read.failed) throw new Error(read.message);
  const made = await makeReading(database.app, author, {
    attachmentId,
    spec: inspection.spec,
    summary: read.summary,
    problems: 0,
  });
  return made.readingId;
}

const write = (entryId: string, append: Parameters<typeof appendServerEdit>[1]['append']) =>
  database.app.transaction((tx) => appendServerEdit(tx, { entryId, actor: author, append }));

const block = (attrs: Record<string, unknown>) => ({
  type: 'diffusionBlock',
  attrs: { ...BLOCK_DEFAULTS, blockId: randomUUID(), ...attrs },
});

const blocksOf = (entryId: string) =>
  database.app.select().from(blockResult).where(eq(blockResult.entryId, entryId));
const done = (entryId: string, count = 1) =>
  until(
    'results are there',
    async () => (await blocksOf(entryId)).filter((row) => row.status === 'done').length === count,
  );

describe('the projector', () => {
  test('writes words and the result that the same analysis gives when called directly', async () => {
    const entryId = await newEntry();
    const readingId = await addReading(entryId, 'g03_free_3d_ensemble.csv');
    await write(entryId, [
      { type: 'paragraph', content: [{ type: 'text', text: 'Three axes.' }] },
      block({ readingIds: [readingId], caption: 'An ensemble' }),
    ]);
    await done(entryId);
    const [text] = await database.app.select().from(entryText).where(eq(entryText.entryId, entryId));
    expect(text?.plain).toBe('Three axes.\nAn ensemble');
    const [row] = await blocksOf(entryId);
    expect(row).toMatchObject({ position: 1, verdict: 'free' });

    const bytes = readFileSync(new URL('g03_free_3d_ensemble.csv', GOLDEN));
    const inspection = inspectFile(bytes, 'g03');
    const read = inspection.failed ? inspection : readTrajectories(bytes, inspection.spec);
    if (read.failed) throw new Error(read.message);
    const direct = analyse([{ ...read.trajectories, hash: 'x' }], settingsOf(BLOCK_DEFAULTS));
    if ('failed' in direct) throw new Error(direct.message);
    expect(row?.d).toBe(direct.D?.value);
    const shown = await listBlocks(database.app, author, entryId);
    expect(shown.blocks[0]?.result?.D).toEqual(direct.D);
    expect(shown.blocks[0]?.readings[0]?.name).toBe('g03_free_3d_ensemble.csv');
  });

  test('the same question is computed once; another setting is another question', async () => {
    const first = await newEntry();
    const readingId = await addReading(first, 'g14_short.csv');
    await write(first, [block({ readingIds: [readingId] })]);
    await done(first);
    const count = async () => (await database.app.select({ a: result.address }).from(result)).length;
    const before = await count();
    await write(first, [block({ readingIds: [readingId] })]);
    await done(first, 2);
    expect(await count()).toBe(before);
    await write(first, [block({ readingIds: [readingId], dims: 1 })]);
    await done(first, 3);
    expect(await count()).toBe(before + 1);
  });

  test('forged numbers never become values, and unusable settings are named', async () => {
    const entryId = await newEntry();
    const readingId = await addReading(entryId, 'g01_free_2d.csv');
    await write(entryId, [
      block({ readingIds: [readingId], D: 99, result: { D: { value: 99 } }, verdict: 'confined' }),
      block({ readingIds: [readingId], drift: 'sideways' }),
      block({ readingIds: [randomUUID()] }),
    ]);
    await done(entryId);
    const rows = (await blocksOf(entryId)).sort((a, b) => a.position - b.position);
    expect(rows[0]?.d).toBeCloseTo(0.4852, 3);
    expect(JSON.stringify(rows)).not.toContain('99}');
    expect(rows[1]).toMatchObject({ status: 'failed', d: null });
    expect(rows[1]?.message).toContain('drift');
    expect(rows[2]).toMatchObject({ status: 'failed', d: null });
  });

  test("another entry's file is not shown or computed", async () => {
    const theirs = await newEntry();
    const readingId = await addReading(theirs, 'g06_flow.csv');
    const mine = await newEntry();
    await write(mine, [block({ readingIds: [readingId] })]);
    await until('it is refused', async () => (await blocksOf(mine))[0]?.status === 'failed');
    expect((await listBlocks(database.app, author, mine)).blocks[0]?.readings).toEqual([]);
  });

  test('a copied block stays visible under a name of its own', async () => {
    const entryId = await newEntry();
    const readingId = await addReading(entryId, 'g14_short.csv');
    const one = block({ readingIds: [readingId] });
    await write(entryId, [one, one]);
    await done(entryId, 2);
    expect((await blocksOf(entryId)).map((row) => row.blockId).sort()).toEqual([
      one.attrs.blockId,
      `${one.attrs.blockId}#2`,
    ]);
  });

  test('what was written while it was away is caught up', async () => {
    await projector.stop();
    const entryId = await newEntry();
    await write(entryId, [{ type: 'paragraph', content: [{ type: 'text', text: 'Written meanwhile.' }] }]);
    projector = await startProjector({ databaseUrl: database.urls.motebook_app, openFile });
    await until('caught up', async () => {
      const [text] = await database.app.select().from(entryText).where(eq(entryText.entryId, entryId));
      return text?.plain === 'Written meanwhile.';
    });
  });

  test('a file that cannot be fetched leaves the block waiting, and it is computed once the file is back', async () => {
    const entryId = await newEntry();
    const readingId = await addReading(entryId, 'g02_free_2d_noise_blur.csv');
    const [sha] = [...files.keys()].slice(-1);
    const kept = files.get(sha!)!;
    files.delete(sha!);
    await write(entryId, [block({ readingIds: [readingId] })]);
    await until('it waits', async () => (await blocksOf(entryId))[0]?.status === 'waiting');
    files.set(sha!, kept);
    await done(entryId);
  });

  test('after two hundred updates a snapshot is kept that equals the log', async () => {
    const entryId = await newEntry();
    for (let i = 0; i < 205; i++) await write(entryId, [{ type: 'paragraph' }]);
    await until('a snapshot is kept', async () => {
      const { rows } = await database.app.execute(
        sql`SELECT 1 FROM entry_snapshot WHERE entry_id = ${entryId}`,
      );
      return rows.length > 0;
    });
  });
});

test('a job that runs too long fails with a sentence, and the next one gets a fresh thread', async () => {
  const worker = new AnalysisWorker({ create: () => newAnalysisThread(), limitMs: 1 });
  const bytes = readFileSync(new URL('g02_free_2d_noise_blur.csv', GOLDEN));
  const request = { kind: 'intake', bytes, name: 'g02.csv', stated: {}, spec: null } as const;
  await expect(worker.run<'intake'>(request)).rejects.toThrow(/took longer/);
  await worker.stop();
  const patient = new AnalysisWorker({ create: () => newAnalysisThread() });
  const answer = await patient.run<'intake'>(request);
  expect(answer.inspection.failed).toBe(false);
  await patient.stop();
});
