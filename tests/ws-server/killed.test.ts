import { spawn, type ChildProcess } from 'node:child_process';
import path from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { seedEntry } from '../../db/commands/entry/write-document';
import { checkLog } from '../helpers/check-log';
import { PUBLIC_URL, SECRET, until } from '../helpers/collab-clients';
import { createTestDatabase, type TestDatabase } from '../helpers/database';
import { makeEntry, makeMember, makeNotebook, makePerson } from '../helpers/factories';
import { freePort } from '../helpers/global-cluster';
import { Typist } from '../helpers/typist';

/** The real process, killed with no chance to say goodbye while several people type (fault F01; rules C1 to C3, C5). */
const PROJECT = path.resolve(import.meta.dirname, '../..');
const ROUNDS = 5;
let database: TestDatabase;
let port: number;
let child: ChildProcess | null = null;
const log: string[] = [];

beforeAll(async () => {
  database = await createTestDatabase();
  port = await freePort();
});
afterAll(async () => {
  await kill();
  await database.drop();
});

async function begin(): Promise<void> {
  const started = spawn(process.execPath, ['--import', 'tsx', 'ws-server/main.ts'], {
    cwd: PROJECT,
    env: {
      PATH: process.env.PATH ?? '',
      NODE_ENV: 'production',
      MOTEBOOK_WS_PORT: String(port),
      MOTEBOOK_DATABASE_WS: database.urls.motebook_ws,
      NEXTAUTH_URL: PUBLIC_URL,
      NEXTAUTH_SECRET: SECRET,
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  child = started;
  let ready = false;
  for (const stream of [started.stdout, started.stderr]) {
    stream.setEncoding('utf8').on('data', (text: string) => {
      log.push(text);
      if (text.includes('listens on port')) ready = true;
    });
  }
  await until('the server listens', () => {
    if (started.exitCode !== null) throw new Error(`it ended: ${log.join('')}`);
    return ready;
  });
}

async function kill(): Promise<void> {
  const running = child;
  child = null;
  if (!running || running.exitCode !== null || running.signalCode !== null) return;
  const gone = new Promise((resolve) => running.once('exit', resolve));
  running.kill('SIGKILL');
  await gone;
}

test('a killed server loses nothing that a page called saved, and what was under way arrives once', async () => {
  const people = await Promise.all(
    ['Noor', 'Keita', 'Mara', 'Jun'].map((name) => makePerson(database.app, { name })),
  );
  const owner = people[0]!;
  const notebook = await makeNotebook(database.app, owner);
  for (const one of people.slice(1)) await makeMember(database.app, notebook.id, one, 'editor');
  const entryId = await makeEntry(database.app, notebook.id, owner);
  await database.app.transaction((tx) => seedEntry(tx, { entryId, actor: owner }));

  await begin();
  // One person with two pages: both are one account with two client ids.
  const typists = await Promise.all(
    [...people, owner].map((actor, i) => Typist.open('abcde'[i]!, port, entryId, actor)),
  );
  try {
    for (const one of typists) await until('everybody is in', () => one.phase === 'saved');
    let underWay = 0;
    for (let round = 0; round < ROUNDS; round++) {
      for (let step = 0; step < 20 + 7 * round; step++) {
        typists[(step * 3 + round) % typists.length]!.type();
        await pause(2);
      }
      await until('somebody is told of something saved', () => typists.some((one) => one.saved.size > 0));
      // A last burst, and the server goes before it can answer.
      for (const one of typists) one.type(3);
      await kill();
      const stored = await checkLog(database.app, entryId);
      for (const one of typists) {
        for (const word of one.saved) expect(stored).toContain(word);
        await until('the page says that it is offline', () => one.phase === 'offline');
        expect(one.page.hasUnsaved).toBe(one.saved.size < one.typed.length);
        underWay += one.typed.length - one.saved.size;
        // Typed while nobody answers.
        one.type();
        expect(one.page.hasUnsaved).toBe(true);
      }
      await begin();
      for (const one of typists) await until('saved again', () => one.phase === 'saved', 60);
      await until('all pages are alike', () => new Set(typists.map((one) => one.text())).size === 1);
    }
    expect(underWay).toBeGreaterThan(0);

    const stored = await checkLog(database.app, entryId);
    for (const one of typists) {
      expect(one.text()).toBe(stored);
      expect(one.saved.size).toBe(one.typed.length);
      for (const word of one.typed) expect([word, stored.split(word).length - 1]).toEqual([word, 1]);
      expect(one.phases).not.toContain('refused');
      expect(one.phases).not.toContain('ended');
    }
    const typedChars = typists.flatMap((one) => one.typed).join('').length;
    expect(stored.length).toBe(typedChars);
  } finally {
    for (const one of typists) one.close();
  }
});

test('a server that is told to end stores what it has taken, tells the pages to come back, and ends with 0', async () => {
  const owner = await makePerson(database.app);
  const notebook = await makeNotebook(database.app, owner);
  const entryId = await makeEntry(database.app, notebook.id, owner);
  await database.app.transaction((tx) => seedEntry(tx, { entryId, actor: owner }));
  if (!child) await begin();
  const typist = await Typist.open('t', port, entryId, owner);
  try {
    await until('in', () => typist.phase === 'saved');
    typist.type(5);
    await until('saved', () => typist.phase === 'saved');
    const running = child!;
    const code = new Promise((resolve) => running.once('exit', resolve));
    running.kill('SIGTERM');
    expect(await code).toBe(0);
    child = null;
    await until('offline', () => typist.phase === 'offline');
    typist.type(2);
    await begin();
    await until('saved again', () => typist.phase === 'saved', 60);
    expect(await checkLog(database.app, entryId)).toBe(typist.typed.join(''));
  } finally {
    typist.close();
  }
});
