import { randomUUID } from 'node:crypto';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { analyse } from '../../../analysis/analyse';
import { inspectFile } from '../../../analysis/intake/inspect-file';
import { readTrajectories } from '../../../analysis/intake/read-trajectories';
import type { WorkerAnswers, WorkerRequest } from '../../../analysis/worker/messages';
import { BLOCK_DEFAULTS, settingsOf } from '../../../db/inputs/block-settings';
import { listBlocks } from '../../../db/queries/block/list-blocks';
import { AnalysisWorker } from '../../../db/worker/analysis-worker';
import { newAnalysisThread } from '../../../db/worker/new-thread';
import { until } from '../../helpers/collab-clients';
import { block, golden, paragraph, World } from './world';

/** Counts what it is asked to compute. */
class CountingWorker extends AnalysisWorker {
  asked = 0;
  override run<K extends WorkerRequest['kind']>(
    request: Extract<WorkerRequest, { kind: K }>,
  ): Promise<WorkerAnswers[K]> {
    this.asked += 1;
    return super.run(request);
  }
}

let world: World;
const worker = new CountingWorker({ create: () => newAnalysisThread() });

beforeAll(async () => {
  world = await World.create();
  await world.start({ worker });
});
afterAll(() => world.end());

function analyseDirectly(name: string) {
  const bytes = golden(name);
  const inspection = inspectFile(bytes, name);
  const read = inspection.failed ? inspection : readTrajectories(bytes, inspection.spec);
  if (read.failed) throw new Error(read.message);
  const direct = analyse([{ ...read.trajectories, hash: 'x' }], settingsOf(BLOCK_DEFAULTS));
  if ('failed' in direct) throw new Error(direct.message);
  return direct;
}

describe('what is written', () => {
  test('words, and the numbers that the same analysis gives when called directly', async () => {
    const entryId = await world.newEntry();
    const readingId = await world.addReading(entryId, 'g03_free_3d_ensemble.csv');
    await world.append(
      entryId,
      paragraph('Three axes.'),
      block({ readingIds: [readingId], caption: 'An ensemble' }),
    );
    await world.wait(entryId, 'done');
    expect(await world.text(entryId)).toBe('Three axes.\nAn ensemble');
    const direct = analyseDirectly('g03_free_3d_ensemble.csv');
    const [row] = await world.blocks(entryId);
    expect(row).toMatchObject({
      position: 1,
      caption: 'An ensemble',
      verdict: direct.verdict,
      d: direct.D?.value,
      dLo: direct.D?.lo,
      dHi: direct.D?.hi,
    });
    const { blocks } = await listBlocks(world.db, world.author, entryId);
    expect(blocks[0]?.result).toEqual({ ...direct, readingHashes: [blocks[0]?.readings[0]?.hash] });
    expect(blocks[0]?.readings[0]?.name).toBe('g03_free_3d_ensemble.csv');
    expect(blocks[0]?.engine).toBe(direct.engine);
  });

  test('a block without a file is empty, one removed from the text is gone, the others move up', async () => {
    const entryId = await world.newEntry();
    const first = block({});
    const second = block({ caption: 'stays' });
    await world.append(entryId, first, second);
    await world.wait(entryId, 'empty', 2);
    await world.remove(entryId, first.attrs.blockId);
    await world.wait(entryId, 'empty', 1);
    expect(await world.blocks(entryId)).toMatchObject([{ blockId: second.attrs.blockId, position: 1 }]);
  });

  test('open pages are told when the block waits and again when it is done, not of words', async () => {
    const entryId = await world.newEntry();
    const readingId = await world.addReading(entryId, 'g04_free_1d.csv');
    await until('the empty page was read', async () => (await world.text(entryId)) === '');
    const heard: { entry: string; seq: number }[] = [];
    const listener = new pg.Client({ connectionString: world.database.urls.motebook_app });
    await listener.connect();
    listener.on('notification', ({ payload }) => {
      const news = JSON.parse(payload ?? '') as { entry: string; seq: number };
      if (news.entry === entryId) heard.push(news);
    });
    await listener.query('LISTEN motebook_projected');
    try {
      await world.append(entryId, block({ readingIds: [readingId] }));
      await world.wait(entryId, 'done');
      await until('both were told', () => heard.length === 2);
      await world.append(entryId, paragraph('Only words.'));
      await until('the words are there', async () => (await world.text(entryId)) === 'Only words.');
      expect(heard).toEqual([
        { entry: entryId, seq: 2 },
        { entry: entryId, seq: 2 },
      ]);
    } finally {
      await listener.end();
    }
  });
});

describe('results', () => {
  test('the same question is computed once, whichever entries ask it', async () => {
    const one = await world.newEntry();
    const other = await world.newEntry();
    const readings = [
      await world.addReading(one, 'g14_short.csv'),
      await world.addReading(other, 'g14_short.csv'),
    ];
    const before = { kept: await world.results(), asked: worker.asked };
    await Promise.all([
      world.append(one, block({ readingIds: [readings[0]] }), block({ readingIds: [readings[0]] })),
      world.append(other, block({ readingIds: [readings[1]] })),
    ]);
    await world.wait(one, 'done', 2);
    await world.wait(other, 'done');
    expect({ kept: await world.results(), asked: worker.asked }).toEqual({
      kept: before.kept + 1,
      asked: before.asked + 1,
    });
  });

  test('another setting is another question; the old one is answered from what is kept', async () => {
    const entryId = await world.newEntry();
    const readingId = await world.addReading(entryId, 'g01_free_2d.csv');
    const one = block({ readingIds: [readingId] });
    await world.append(entryId, one);
    await world.wait(entryId, 'done');
    const inTwo = (await world.blocks(entryId))[0]!;
    await world.set(entryId, one.attrs.blockId, 'dims', 1);
    await until('it was computed for one axis', async () => {
      const [now] = await world.blocks(entryId);
      return now?.status === 'done' && now.address !== inTwo.address;
    });
    expect((await world.blocks(entryId))[0]?.d).not.toBe(inTwo.d);
    const asked = worker.asked;
    await world.set(entryId, one.attrs.blockId, 'dims', 'auto');
    await until('the first result is back', async () => {
      const [now] = await world.blocks(entryId);
      return now?.address === inTwo.address && now.d === inTwo.d;
    });
    expect(worker.asked).toBe(asked);
  });

  test('data that cannot be analysed say why, and that answer is kept too', async () => {
    const entryId = await world.newEntry();
    const bytes = Buffer.from('track,t,x,y\n1,0,1,2\n2,0,3,4\n3,0,5,1\n');
    const readingId = await world.addReading(entryId, 'points.csv', { bytes });
    await world.append(entryId, block({ readingIds: [readingId] }));
    await world.wait(entryId, 'failed');
    const [row] = await world.blocks(entryId);
    expect(row).toMatchObject({ d: null, verdict: null });
    expect(row?.message).toMatch(/No track has two/);
    expect(row?.address).toMatch(/^[0-9a-f]{64}$/);
  });
});

describe('what the document cannot do', () => {
  test('forged numbers never become values', async () => {
    const entryId = await world.newEntry();
    const readingId = await world.addReading(entryId, 'g01_free_2d.csv');
    const number = 98.7654321;
    const forged = { D: number, result: { D: { value: number } }, verdict: 'confined', d: number };
    await world.append(entryId, block({ readingIds: [readingId], ...forged }), block(forged));
    await world.wait(entryId, 'done');
    const rows = await world.blocks(entryId);
    expect(rows[0]?.d).toBe(analyseDirectly('g01_free_2d.csv').D?.value);
    expect(rows[1]).toMatchObject({ status: 'empty', d: null, verdict: null });
    const answer = JSON.stringify(await listBlocks(world.db, world.author, entryId));
    expect(JSON.stringify(rows) + answer).not.toContain(String(number));
  });

  test('settings that cannot be used are named in words', async () => {
    const entryId = await world.newEntry();
    const readingId = await world.addReading(entryId, 'g01_free_2d.csv');
    await world.append(
      entryId,
      block({ readingIds: [readingId], drift: 'sideways', sigma: -1 }),
      block({ readingIds: 'all of them' }),
      block({ readingIds: [readingId], excludedTracks: [{ reading: 0, track: 'a\0b', reason: '' }] }),
    );
    await world.wait(entryId, 'failed', 3);
    const messages = (await world.blocks(entryId)).map((row) => row.message);
    expect(messages[0]).toContain('common drift, localisation error');
    expect(messages[1]).toContain('files');
    expect(messages[2]).toContain('tracks left out');
  });

  test("another entry's file is neither shown nor computed", async () => {
    const theirs = await world.newEntry();
    const readingId = await world.addReading(theirs, 'g06_flow.csv');
    const mine = await world.newEntry();
    await world.append(mine, block({ readingIds: [readingId] }), block({ readingIds: [randomUUID()] }));
    await world.wait(mine, 'failed', 2);
    const [row, unknown] = await world.blocks(mine);
    expect(row?.message).toContain('does not belong to this entry');
    // Whether the id exists elsewhere must not show.
    expect(row?.message).toBe(unknown?.message);
    expect((await listBlocks(world.db, world.author, mine)).blocks[0]?.readings).toEqual([]);
  });

  test('a file that stands in a block twice would count twice, so it is refused', async () => {
    const entryId = await world.newEntry();
    const readings = [
      await world.addReading(entryId, 'g14_short.csv'),
      await world.addReading(entryId, 'g14_short.csv'),
    ];
    await world.append(
      entryId,
      block({ readingIds: readings }),
      block({ readingIds: [readings[0], readings[0]] }),
    );
    await world.wait(entryId, 'failed', 2);
    for (const row of await world.blocks(entryId)) expect(row.message).toContain('twice');
  });

  test('a copy that kept its id stays visible under a name of its own', async () => {
    const entryId = await world.newEntry();
    const readingId = await world.addReading(entryId, 'g14_short.csv');
    const one = block({ readingIds: [readingId] });
    await world.append(entryId, one, one, block({ blockId: 'not an id' }));
    await world.wait(entryId, 'done', 2);
    expect((await world.blocks(entryId)).map((row) => row.blockId)).toEqual([
      one.attrs.blockId,
      `${one.attrs.blockId}#2`,
      'unnamed',
    ]);
  });
});
