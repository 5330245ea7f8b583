import { spawn, type ChildProcess } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { sql } from 'drizzle-orm';
import { afterAll, afterEach, beforeAll, expect, test, vi } from 'vitest';
import { connect, type Database } from '../../../db/client';
import { toShared } from '../../../db/commands/entry/document-json';
import { seedEntry } from '../../../db/commands/entry/write-document';
import type { Actor } from '../../../db/policies/may';
import { ensureCluster, type Cluster } from '../../../db/setup/cluster';
import { migrateDatabase } from '../../../db/setup/migrate';
import { entryText } from '../../../db/schema/index';
import { until } from '../../helpers/collab-clients';
import { makeEntry, makeNotebook, makePerson } from '../../helpers/factories';
import { freePort } from '../../helpers/global-cluster';
import { editDocument, paragraph } from './world';

/** The real projector process beside a PostgreSQL of its own, which goes away and comes back. */
const project = path.resolve(import.meta.dirname, '../../..');
let folder: string;
let cluster: Cluster;
let db: Database;
let author: Actor;
let notebookId: string;
let running: ChildProcess | null = null;
let log = '';

beforeAll(async () => {
  // This process's own lost connections; those of the projector are read from its log.
  vi.spyOn(console, 'error').mockImplementation(() => undefined);
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-projector-away-'));
  cluster = await ensureCluster({ folder, port: await freePort(), say: () => undefined });
  await migrateDatabase(cluster.url('motebook_owner'));
  db = connect(cluster.url('motebook_app'), { max: 4, name: 'test-app' });
  author = await makePerson(db);
  notebookId = (await makeNotebook(db, author)).id;
});
afterEach(async () => {
  await end('SIGKILL');
});
afterAll(async () => {
  await db.$client.end();
  await cluster.stop();
  rmSync(folder, { recursive: true, force: true });
});

function begin(): ChildProcess {
  log = '';
  running = spawn(process.execPath, ['--import', 'tsx', 'ws-server/projector/main.ts'], {
    cwd: project,
    env: {
      PATH: process.env.PATH ?? '',
      MOTEBOOK_DATABASE_APP: cluster.url('motebook_app'),
      MOTEBOOK_CACHE: path.join(folder, 'cache'),
      UPLOADTHING_TOKEN: 'no file is fetched in this test',
    } as unknown as NodeJS.ProcessEnv,
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  for (const stream of [running.stdout, running.stderr]) stream?.on('data', (text) => (log += String(text)));
  return running;
}

/** @returns the exit code, null after a signal. */
async function end(signal: NodeJS.Signals): Promise<number | null> {
  const child = running;
  running = null;
  if (!child || child.exitCode !== null || child.signalCode !== null) return child?.exitCode ?? null;
  const code = new Promise<number | null>((resolve) => child.once('exit', resolve));
  child.kill(signal);
  return code;
}

async function entryWith(words: string): Promise<string> {
  const entryId = await makeEntry(db, notebookId, author);
  await db.transaction((tx) => seedEntry(tx, { entryId, actor: author }));
  await editDocument(db, author, entryId, (root) => root.insert(0, [toShared(paragraph(words))]));
  return entryId;
}

const projected = (entryId: string, words: string) =>
  until(
    `"${words}" is projected; the projector says: ${log}`,
    async () => {
      const rows = await db
        .select()
        .from(entryText)
        .where(sql`entry_id = ${entryId}`);
      return rows[0]?.plain.includes(words) ?? false;
    },
    90,
  );

async function answers(): Promise<boolean> {
  return db.execute(sql`SELECT 1`).then(
    () => true,
    () => false,
  );
}

/** The server's first process and with it every connection, at once. */
async function killDatabase(): Promise<void> {
  let lost = false;
  cluster.server.onLost = () => (lost = true);
  process.kill(cluster.server.pid ?? 0, 'SIGKILL');
  await until('the server is lost', () => lost);
}

test('lives through stops and kills of the database, and goes on by itself', async () => {
  const child = begin();
  const first = await entryWith('before');
  await projected(first, 'before');
  for (const [round, takeAway] of [() => cluster.stop(), killDatabase].entries()) {
    // Something is always under way when the database goes.
    const entries = [];
    for (let one = 0; one < 5; one++) entries.push(await entryWith(`round ${round}, entry ${one}`));
    await takeAway();
    await until('it notices', () => log.split('database is away').length === round + 2);
    await new Promise((resolve) => setTimeout(resolve, 3_000));
    expect([child.exitCode, child.signalCode, log]).toEqual([null, null, log]);
    await cluster.start();
    await until('the database answers', answers);
    const later = await entryWith(`after round ${round}`);
    await projected(later, `after round ${round}`);
    for (const [one, entryId] of entries.entries()) await projected(entryId, `round ${round}, entry ${one}`);
    // One word when it goes, and one when it is back, however long it was away.
    await until('it says so', () => log.split('database is back').length === round + 2);
    expect(log.split('database is away').length).toBe(round + 2);
  }
  expect(await end('SIGTERM')).toBe(0);
});

test('started before the database, it waits for it', async () => {
  await cluster.stop();
  const child = begin();
  await until('it says that it waits', () => log.includes('database is away'));
  await new Promise((resolve) => setTimeout(resolve, 1_500));
  expect([child.exitCode, child.signalCode]).toEqual([null, null]);
  await cluster.start();
  await until('the database answers', answers);
  await projected(await entryWith('at last'), 'at last');
  expect(log.split('database is away').length).toBe(2);
  expect(await end('SIGTERM')).toBe(0);
});

test('asked to end while it waits, it ends', async () => {
  await cluster.stop();
  const child = begin();
  await until('it says that it waits', () => log.includes('database is away'));
  const ended = new Promise((resolve) => child.once('exit', resolve));
  child.kill('SIGTERM');
  await ended;
  await cluster.start();
});

test('a database that refuses its password is no reason to wait', async () => {
  const child = spawn(process.execPath, ['--import', 'tsx', 'ws-server/projector/main.ts'], {
    cwd: project,
    env: {
      PATH: process.env.PATH ?? '',
      MOTEBOOK_DATABASE_APP: cluster.url('motebook_app').replace(/:[0-9a-f]+@/, `:${'0'.repeat(48)}@`),
      MOTEBOOK_CACHE: path.join(folder, 'cache'),
      UPLOADTHING_TOKEN: 'no file is fetched in this test',
    } as unknown as NodeJS.ProcessEnv,
    stdio: ['ignore', 'ignore', 'pipe'],
  });
  running = child;
  let said = '';
  child.stderr.on('data', (text) => (said += String(text)));
  expect(await new Promise((resolve) => child.once('exit', resolve))).toBe(1);
  expect(said).toContain('password authentication failed');
});
