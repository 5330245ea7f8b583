import { afterAll, beforeAll, expect, test } from 'vitest';
import { writeProjection, type Projection } from '../../../db/commands/projection/write-projection';
import { BLOCK_DEFAULTS, settingsOf } from '../../../db/inputs/block-settings';
import { World } from './world';

let world: World;
beforeAll(async () => {
  world = await World.create();
});
afterAll(() => world.end());

const projection = (entryId: string, seq: number, blocks = 0): Projection => ({
  entryId,
  epoch: 1,
  seq,
  plain: `as of ${seq}`,
  engine: 'test/1',
  blocks: Array.from({ length: blocks }, (_, at) => ({
    blockId: `block ${at}`,
    caption: '',
    readingIds: [],
    settings: settingsOf(BLOCK_DEFAULTS),
    faulty: [],
  })),
});

test('older news never replaces newer, whatever comes last', async () => {
  const entryId = await world.newEntry();
  expect(await writeProjection(world.db, projection(entryId, 7, 1))).toEqual({ wanted: [], changed: true });
  expect(await writeProjection(world.db, projection(entryId, 6, 3))).toBeNull();
  expect(await world.text(entryId)).toBe('as of 7');
  expect(await world.blocks(entryId)).toHaveLength(1);
  expect(await writeProjection(world.db, { ...projection(entryId, 9), epoch: 2 })).toBeNull();
});

test('of many at once the newest stays', async () => {
  const entryId = await world.newEntry();
  const order = [3, 9, 1, 10, 4, 8, 2, 6, 7, 5];
  await Promise.all(order.map((seq) => writeProjection(world.db, projection(entryId, seq, seq))));
  expect(await world.text(entryId)).toBe('as of 10');
  expect(await world.blocks(entryId)).toHaveLength(10);
});

test('blocks that stay the same are left alone', async () => {
  const entryId = await world.newEntry();
  await writeProjection(world.db, projection(entryId, 1, 2));
  const before = await world.blocks(entryId);
  expect(await writeProjection(world.db, projection(entryId, 2, 2))).toMatchObject({ changed: false });
  expect(await world.blocks(entryId)).toEqual(before);
  expect(await writeProjection(world.db, projection(entryId, 3, 1))).toMatchObject({ changed: true });
});
