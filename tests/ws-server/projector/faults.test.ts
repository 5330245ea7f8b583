import { Worker } from 'node:worker_threads';
import { sql } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { AppError } from '../../../db/errors';
import { AnalysisWorker } from '../../../db/worker/analysis-worker';
import { newAnalysisThread } from '../../../db/worker/new-thread';
import { until } from '../../helpers/collab-clients';
import { block, paragraph, World } from './world';

let world: World;
beforeEach(async () => {
  world = await World.create();
  // Each of these is told in the server's log; here only what the page says matters.
  vi.spyOn(console, 'error').mockImplementation(() => undefined);
});
afterEach(async () => {
  await world.end();
  vi.restoreAllMocks();
});

async function entryWithBlock(name = 'g14_short.csv') {
  const entryId = await world.newEntry();
  const one = block({ readingIds: [await world.addReading(entryId, name)] });
  await world.append(entryId, one);
  return { entryId, blockId: one.attrs.blockId };
}
const messageOf = async (entryId: string) => (await world.blocks(entryId))[0]?.message;

describe('the database and the projector', () => {
  test('what was written while it was away is caught up', async () => {
    const { entryId } = await entryWithBlock();
    await world.append(entryId, paragraph('Written meanwhile.'));
    await world.start();
    await world.wait(entryId, 'done');
    expect(await world.text(entryId)).toBe('Written meanwhile.');
  });

  test('a broken LISTEN connection comes back, and nothing is missed', async () => {
    await world.start();
    const entryId = await world.newEntry();
    await world.db.execute(sql`
      SELECT pg_terminate_backend(pid) FROM pg_stat_activity
      WHERE application_name = 'motebook-listen' AND datname = current_database()`);
    await world.append(entryId, paragraph('Said into the gap.'));
    await until('it was heard', async () => (await world.text(entryId)) === 'Said into the gap.');
  });

  test('an entry whose log has a hole is told of, stays as it was, and holds up no other', async () => {
    await world.start();
    const broken = await world.newEntry();
    await world.append(broken, paragraph('Whole.'));
    await until('it was read', async () => (await world.text(broken)) === 'Whole.');
    // Only somebody past all the rules of the database can do this.
    await world.database.owner.execute(sql`ALTER TABLE entry_update DISABLE TRIGGER insert_only`);
    await world.database.owner.execute(sql`DELETE FROM entry_update WHERE entry_id = ${broken} AND seq = 2`);
    await world.append(await world.newEntry(), paragraph('x'));
    await world.db.execute(
      sql`SELECT pg_notify('motebook_update', ${JSON.stringify({ entry: broken, seq: 3 })})`,
    );
    const other = await world.newEntry();
    await world.append(other, paragraph('Not held up.'));
    await until('the other was read', async () => (await world.text(other)) === 'Not held up.');
    await until('it was told', () =>
      vi.mocked(console.error).mock.calls.some(([line]) => String(line).includes(broken)),
    );
    expect(await world.text(broken)).toBe('Whole.');
  });
});

describe('an engine that is new', () => {
  test('is asked for the blocks of drafts when it starts; the results of the old one stay', async () => {
    const projector = await world.start();
    const { entryId } = await entryWithBlock();
    await world.wait(entryId, 'done');
    await projector.stop();
    const [before] = await world.blocks(entryId);
    // As an older engine would have left it: the same outcome, at another address.
    const address = 'e'.repeat(64);
    await world.db.execute(sql`
      INSERT INTO result (address, engine, outcome, milliseconds)
      SELECT ${address}, 'motebook-engine/0', outcome, milliseconds FROM result WHERE address = ${before!.address}`);
    await world.db.execute(sql`UPDATE block_result SET address = ${address} WHERE entry_id = ${entryId}`);
    await world.start();
    await until('the new engine answered', async () => {
      const [now] = await world.blocks(entryId);
      return now?.address === before!.address;
    });
    expect(await world.results()).toBe(2);
  });
});

describe('files', () => {
  test('while the file service is away the block waits and says so; then it is computed by itself', async () => {
    let away = true;
    await world.start({
      openFile: (file) => (away ? Promise.reject(new AppError('storage-down')) : world.openFile(file)),
    });
    const { entryId } = await entryWithBlock();
    await until('it says so', async () => (await messageOf(entryId))?.includes('file service') ?? false);
    expect((await world.blocks(entryId))[0]?.status).toBe('waiting');
    away = false;
    await world.wait(entryId, 'done');
    expect(await messageOf(entryId)).toBe('');
  });

  test('bytes that are not those of the record give no result', async () => {
    const sentence = 'The stored bytes are not those that were recorded.';
    await world.start({ openFile: () => Promise.reject(new AppError('unreadable', { sentence })) });
    const { entryId } = await entryWithBlock();
    await world.wait(entryId, 'failed');
    expect(await messageOf(entryId)).toBe(sentence);
    expect(await world.results()).toBe(0);
  });
});

describe('the worker', () => {
  /** A thread of this code instead of the analysis. */
  const thread = (code: string) => () =>
    new Worker(`require('node:worker_threads').parentPort.once('message', () => { ${code} })`, {
      eval: true,
      resourceLimits: { maxOldGenerationSizeMb: 16 },
    });
  const giveUp = async (worker: AnalysisWorker, sentence: RegExp) => {
    await world.start({ worker });
    const { entryId } = await entryWithBlock();
    await world.wait(entryId, 'failed');
    expect(await messageOf(entryId)).toMatch(sentence);
    // What happened on this server is no answer to the question: the next engine run may give one.
    expect(await world.results()).toBe(0);
    await world.append(entryId, paragraph('Goes on.'));
    await until('words go on', async () => (await world.text(entryId)) === 'Goes on.');
    return entryId;
  };

  test('an analysis that takes too long is ended', async () => {
    const create = thread('for (;;) {}');
    await giveUp(new AnalysisWorker({ create, limitMs: 300 }), /took longer than/);
  });

  test('an analysis that takes too much memory is ended', async () => {
    const create = thread('const all = []; for (;;) all.push(new Array(1e5).fill(all.length));');
    await giveUp(new AnalysisWorker({ create }), /more memory/);
  });

  test('a thread that dies once is asked once more', async () => {
    let made = 0;
    const create = () => ((made += 1) === 1 ? thread('process.exit(1)')() : newAnalysisThread());
    await world.start({ worker: new AnalysisWorker({ create }) });
    const { entryId } = await entryWithBlock();
    await world.wait(entryId, 'done');
    expect(made).toBe(2);
  });

  test('one that dies twice gives up; a changed setting asks again', async () => {
    let broken = true;
    const create = () => (broken ? thread('process.exit(1)')() : newAnalysisThread());
    const entryId = await giveUp(new AnalysisWorker({ create }), /unexpectedly, twice/);
    broken = false;
    const [row] = await world.blocks(entryId);
    await world.set(entryId, row!.blockId, 'minTrackFrames', 3);
    await world.wait(entryId, 'done');
  });

  test('the next start asks again what was given up', async () => {
    const projector = await world.start({
      worker: new AnalysisWorker({ create: thread('for (;;) {}'), limitMs: 200 }),
    });
    const { entryId } = await entryWithBlock();
    await world.wait(entryId, 'failed');
    await projector.stop();
    await world.start();
    await world.wait(entryId, 'done');
  });

  test('a fault of the program is told as one', async () => {
    const code =
      "require('node:worker_threads').parentPort.postMessage({ id: 1, error: 'x is not a function' })";
    await giveUp(new AnalysisWorker({ create: thread(code) }), /fault of the program/);
  });
});
