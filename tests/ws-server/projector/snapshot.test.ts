import { and, desc, eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test, vi } from 'vitest';
import * as Y from 'yjs';
import { loadDocument, readTail, replay } from '../../../db/queries/document/load-document';
import { entrySnapshot } from '../../../db/schema/index';
import type { RunningProjector } from '../../../ws-server/projector/projector';
import { UPDATES_PER_SNAPSHOT } from '../../../ws-server/projector/snapshot';
import { until } from '../../helpers/collab-clients';
import { paragraph, World } from './world';

let world: World;
let projector: RunningProjector;
beforeAll(async () => {
  world = await World.create();
  projector = await world.start();
});
afterAll(() => world.end());

const newest = async (entryId: string) => {
  const [row] = await world.db
    .select()
    .from(entrySnapshot)
    .where(and(eq(entrySnapshot.entryId, entryId)))
    .orderBy(desc(entrySnapshot.seq))
    .limit(1);
  return row;
};

/** What the rows alone say, up to an update. */
async function fromRows(entryId: string, seq: number): Promise<Y.Doc> {
  const rows = await readTail(world.db, entryId, 1, 0);
  return replay(
    entryId,
    rows.filter((row) => row.seq <= seq),
    seq,
  ).doc;
}

async function fill(entryId: string): Promise<void> {
  for (let i = 0; i < UPDATES_PER_SNAPSHOT; i++) await world.append(entryId, paragraph(`Line ${i}`));
}

test('after two hundred updates a snapshot is kept, and what it opens equals the log', async () => {
  const entryId = await world.newEntry();
  await fill(entryId);
  await until('a snapshot is kept', async () => (await newest(entryId)) !== undefined);
  const loaded = await loadDocument(world.db, entryId);
  const doc = await fromRows(entryId, UPDATES_PER_SNAPSHOT + 1);
  expect(Y.encodeStateVector(loaded!.doc)).toEqual(Y.encodeStateVector(doc));
  expect(loaded!.doc.getXmlFragment('default').toString()).toBe(doc.getXmlFragment('default').toString());
  expect(loaded!.seq).toBe(UPDATES_PER_SNAPSHOT + 1);
});

test('a snapshot that cannot be read, or that lies, is told of; the log decides', async () => {
  const told = vi.spyOn(console, 'error').mockImplementation(() => undefined);
  const entryId = await world.newEntry();
  await fill(entryId);
  await until('a snapshot is kept', async () => (await newest(entryId)) !== undefined);
  const { seq } = (await newest(entryId))!;

  // Past the rules of the database, as a fault of a disk would be.
  const spoil = (state: Buffer) =>
    world.database.owner.execute(
      sql`UPDATE entry_snapshot SET state = ${state} WHERE entry_id = ${entryId} AND seq = ${seq}`,
    );
  await spoil(Buffer.from([1, 1, 255, 255, 0]));
  await world.append(entryId, paragraph('After the flipped byte.'));
  await until('it is read from the log', async () =>
    ((await world.text(entryId)) ?? '').endsWith('Line 199\nAfter the flipped byte.'),
  );
  expect(told.mock.calls.some(([line]) => String(line).includes('snapshot could not be used'))).toBe(true);

  // The state of the log with one line left out: it can be applied, and says something else.
  await projector.stop();
  await fill(entryId);
  const doc = await fromRows(entryId, seq);
  doc.getXmlFragment('default').delete(1, 1);
  await spoil(Buffer.from(Y.encodeStateAsUpdate(doc)));
  projector = await world.start();
  await until('a new snapshot is kept', async () => ((await newest(entryId))?.seq ?? 0) > seq);
  expect(told.mock.calls.some(([line]) => String(line).includes('does not say what its log says'))).toBe(
    true,
  );
  await until('the line is there', async () => ((await world.text(entryId)) ?? '').startsWith('Line 0\n'));
  told.mockRestore();
});
