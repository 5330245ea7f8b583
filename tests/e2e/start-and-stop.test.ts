import { existsSync, readFileSync } from 'node:fs';
import { createServer } from 'node:net';
import path from 'node:path';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { findRunNote, isOurs, type RunNote } from '../../db/setup/run-note';
import { newPlace, removePlace, startStack, type Stack } from './stack';

/**
 * `node start.mjs` as a person uses it: start, Ctrl-C, start again, and what goes wrong. The pages are built already, by
 * the stack that all journeys share.
 */
const PROJECT = path.resolve(import.meta.dirname, '../..');
let place: Record<string, string>;
let stack: Stack | null = null;

beforeAll(async () => {
  place = await newPlace({ demo: false });
});
afterAll(async () => {
  await stack?.stop();
  await removePlace(place);
});

const folder = () => place.MOTEBOOK_DATA!;
const pidsOf = (note: RunNote) => [note.supervisor, ...Object.values(note.children)];
const running = (note: RunNote) => pidsOf(note).filter((pid) => existsSync(`/proc/${pid}`));

/** Starts, expecting that it ends by itself. @returns what it said. */
async function refusedStart(given: Record<string, string>): Promise<string> {
  const outcome = await startStack(given).then(
    async (started) => {
      await started.stop();
      throw new Error('it started');
    },
    (error: Error) => error.message,
  );
  expect(outcome).toMatch(/^start ended with [1-9]/);
  return outcome;
}

test('start, Ctrl-C and a second start: nothing is left running between them, and the data stay', async () => {
  stack = await startStack(place);
  const first = findRunNote(folder())!;
  expect(Object.keys(first.children).sort()).toEqual(['files', 'mail', 'projector', 'smtp', 'web', 'ws']);
  for (const pid of pidsOf(first)) expect([pid, isOurs(pid, PROJECT)]).toEqual([pid, true]);
  const database = Number(readFileSync(path.join(folder(), 'pg', 'postmaster.pid'), 'utf8').split('\n')[0]);
  expect(existsSync(`/proc/${database}`)).toBe(true);
  expect(stack.output()).toContain(`Motebook is ready: ${stack.url}`);
  expect(stack.output()).toContain('npm run add-person');

  const said = await refusedStart({ ...place, ...(await otherPorts()) });
  expect(said).toContain(`Motebook already runs from this folder, at ${stack.url}`);
  expect(said).toMatch(/Ctrl-C/);
  expect(running(first)).toEqual(pidsOf(first));

  expect(await stack.stop()).toBe(0);
  expect(running(first)).toEqual([]);
  expect(existsSync(`/proc/${database}`)).toBe(false);
  expect(findRunNote(folder())).toBeNull();
  const cluster = readFileSync(path.join(folder(), 'secrets.json'), 'utf8');

  stack = await startStack(place);
  expect(stack.output()).not.toContain('Making a database cluster');
  expect(readFileSync(path.join(folder(), 'secrets.json'), 'utf8')).toBe(cluster);
  expect(findRunNote(folder())!.supervisor).not.toBe(first.supervisor);
  expect((await fetch(`${stack.url}/sign-in`)).status).toBe(200);
});

test('a process that dies is started again, and the product answers', async () => {
  const before = findRunNote(folder())!;
  process.kill(before.children.ws!, 'SIGKILL');
  const deadline = Date.now() + 30_000;
  let now = before;
  while (now.children.ws === before.children.ws || !existsSync(`/proc/${now.children.ws}`)) {
    if (Date.now() > deadline) throw new Error('the websocket server did not come back');
    await new Promise((resolve) => setTimeout(resolve, 50));
    now = findRunNote(folder())!;
  }
  expect({ ...now.children, ws: 0 }).toEqual({ ...before.children, ws: 0 });
});

test('a busy port is named with its setting, and another port is offered; nothing is made', async () => {
  const other = await newPlace({ demo: false });
  const holder = createServer();
  await new Promise<void>((resolve) => holder.listen(Number(other.MOTEBOOK_WS_PORT), '127.0.0.1', resolve));
  try {
    const said = await refusedStart(other);
    expect(said).toContain(`port ${other.MOTEBOOK_WS_PORT} (MOTEBOOK_WS_PORT)`);
    expect(said).toMatch(/choose another port, for example: MOTEBOOK_WS_PORT=\d+ npm start/);
    expect(said).not.toMatch(/\n\s+at .*\.[mt]?[jt]s:\d+/);
    expect(existsSync(path.join(other.MOTEBOOK_DATA!, 'pg'))).toBe(false);
  } finally {
    await new Promise((resolve) => holder.close(resolve));
    await removePlace(other);
  }
});

test('the stack that the journeys share is not disturbed by all this', async () => {
  expect((await fetch(`${inject('productUrl')}/sign-in`)).status).toBe(200);
});

async function otherPorts(): Promise<Record<string, string>> {
  const other = await newPlace({ demo: false });
  await removePlace(other);
  const { MOTEBOOK_DATA: _folder, ...ports } = other;
  return ports;
}
