import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test, vi } from 'vitest';
import { connect, type Database } from '../../db/client';
import { seedEntry } from '../../db/commands/entry/write-document';
import { ensureCluster, type Cluster } from '../../db/setup/cluster';
import { migrateDatabase } from '../../db/setup/migrate';
import type { Actor } from '../../db/policies/may';
import { startServer, type RunningServer } from '../../ws-server/server';
import { checkLog } from '../helpers/check-log';
import { PUBLIC_URL, SECRET, until } from '../helpers/collab-clients';
import { makeEntry, makeMember, makeNotebook, makePerson } from '../helpers/factories';
import { freePort } from '../helpers/global-cluster';
import { Typist } from '../helpers/typist';

/** PostgreSQL, killed while people type (fault F02; rules C1, C3, C5, C11): no false "saved", and everything heals. */
let folder: string;
let cluster: Cluster;
let db: Database;
let server: RunningServer;
let noor: Actor;
let keita: Actor;
let notebookId: string;

beforeAll(async () => {
  // What is said on the console about a lost database is what an administrator wants; here it is asked for.
  vi.spyOn(console, 'error').mockImplementation(() => undefined);
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-away-'));
  cluster = await ensureCluster({ folder, port: await freePort(), say: () => undefined });
  await migrateDatabase(cluster.url('motebook_owner'));
  db = connect(cluster.url('motebook_app'), { max: 4, name: 'test-app' });
  noor = await makePerson(db, { name: 'Noor V.' });
  keita = await makePerson(db, { name: 'Keita S.' });
  notebookId = (await makeNotebook(db, noor)).id;
  await makeMember(db, notebookId, keita, 'editor');
  server = await startServer({
    port: 0,
    databaseUrl: cluster.url('motebook_ws'),
    publicUrl: PUBLIC_URL,
    secret: SECRET,
  });
});
afterAll(async () => {
  await server.stop();
  await db.$client.end();
  await cluster.stop();
  rmSync(folder, { recursive: true, force: true });
});

async function twoTypists(): Promise<{ entryId: string; typists: Typist[] }> {
  const entryId = await makeEntry(db, notebookId, noor);
  await db.transaction((tx) => seedEntry(tx, { entryId, actor: noor }));
  const typists = [
    await Typist.open('a', server.port, entryId, noor),
    await Typist.open('b', server.port, entryId, keita),
  ];
  for (const one of typists) await until('in', () => one.phase === 'saved');
  return { entryId, typists };
}

/** The postmaster and with it every connection, at once and without a checkpoint. */
async function killDatabase(): Promise<void> {
  let lost = false;
  cluster.server.onLost = () => (lost = true);
  process.kill(cluster.server.pid ?? 0, 'SIGKILL');
  await until('the server is lost', () => lost);
}

async function answers(): Promise<boolean> {
  try {
    await db.execute(sql`SELECT 1`);
    return true;
  } catch {
    return false;
  }
}

async function healed(entryId: string, typists: Typist[]): Promise<void> {
  for (const one of typists) await until('saved again', () => one.phase === 'saved', 60);
  await until('both pages are alike', () => typists[0]!.text() === typists[1]!.text());
  const stored = await checkLog(db, entryId);
  for (const one of typists) {
    expect(one.text()).toBe(stored);
    for (const word of one.typed) expect([word, stored.split(word).length - 1]).toEqual([word, 1]);
    expect(one.phases).not.toContain('refused');
  }
}

test('a database that dies between two commits: the pages say "saving", and heal when it is back', async () => {
  const { entryId, typists } = await twoTypists();
  for (let round = 0; round < 3; round++) {
    for (let step = 0; step < 15; step++) {
      typists[step % 2]!.type();
      await pause(2);
    }
    const dying = killDatabase();
    for (const one of typists) one.type(2);
    await dying;
    // Sockets live on and the text is on its way, so no page may say that it is saved.
    for (const one of typists) {
      one.type();
      expect([one.phase, one.page.hasUnsaved]).toEqual(['saving', true]);
    }
    await pause(500);
    for (const one of typists) expect(one.phase).toBe('saving');
    await cluster.start();
    await until('the database answers', answers);
    const stored = await checkLog(db, entryId);
    for (const one of typists) for (const word of one.saved) expect(stored).toContain(word);
    await healed(entryId, typists);
  }
  for (const one of typists) one.close();
});

test('a database that stays away: the pages give up waiting, keep what was typed, and heal by themselves', async () => {
  const { entryId, typists } = await twoTypists();
  await killDatabase();
  // One after the other, so that they wait behind each other for the store that never answers.
  for (let step = 0; step < 6; step++) {
    for (const one of typists) one.type();
    await pause(20);
  }
  for (const one of typists) await until('given up', () => one.phase === 'offline', 60);
  for (const one of typists) {
    one.type();
    expect([one.phase, one.page.hasUnsaved]).toEqual(['offline', true]);
  }
  await cluster.start();
  await until('the database answers', answers);
  await healed(entryId, typists);
  // And somebody who comes only now finds a page that can be opened and written in.
  const late = await Typist.open('c', server.port, entryId, noor);
  await until('in', () => late.phase === 'saved');
  late.type();
  await healed(entryId, [late, ...typists]);
  for (const one of [late, ...typists]) one.close();
});
