import { spawn, type ChildProcess } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, expect, test, vi } from 'vitest';
import { UTApi, UTFile } from 'uploadthing/server';
import { simulateDataSet, toCsv } from '../../../analysis/simulate/data-set';
import { startFileService, type RunningFileService } from '../../../app/_server/fakes/file-service';
import { until } from '../../helpers/collab-clients';
import { block, paragraph, World } from './world';

/** The real process, with the real upload SDK, against the local file service. */
const project = path.resolve(import.meta.dirname, '../../..');
const key = { apiKey: 'sk_test_of_a_projector', appId: 'testapp' };
let world: World;
let service: RunningFileService;
let folder: string;
let environment: Record<string, string>;
let running: ChildProcess | null = null;
const log: string[] = [];

beforeAll(async () => {
  world = await World.create();
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-projector-'));
  service = await startFileService({ port: 0, folder: path.join(folder, 'files'), ...key });
  environment = {
    PATH: process.env.PATH ?? '',
    MOTEBOOK_DATABASE_APP: world.database.urls.motebook_app,
    MOTEBOOK_CACHE: path.join(folder, 'cache'),
    UPLOADTHING_TOKEN: Buffer.from(
      JSON.stringify({ ...key, regions: ['local'], ingestHost: 'localhost' }),
    ).toString('base64'),
    UPLOADTHING_INGEST_URL: `http://127.0.0.1:${service.port}`,
    UPLOADTHING_API_URL: `http://127.0.0.1:${service.port}`,
    UPLOADTHING_UFS_HOST: `localhost:${service.port}`,
    UPLOADTHING_UFS_APP_ID_LOCATION: 'path',
  };
});
afterAll(async () => {
  await end('SIGKILL');
  await service.stop();
  await world.end();
  rmSync(folder, { recursive: true, force: true });
});

function begin(): void {
  running = spawn(process.execPath, ['--import', 'tsx', 'ws-server/projector/main.ts'], {
    cwd: project,
    env: environment as NodeJS.ProcessEnv,
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  for (const stream of [running.stdout, running.stderr]) stream?.on('data', (text) => log.push(String(text)));
}

/** @returns the exit code, null after a kill. */
async function end(signal: NodeJS.Signals): Promise<number | null> {
  const child = running;
  running = null;
  if (!child || child.exitCode !== null) return child?.exitCode ?? null;
  const code = new Promise<number | null>((resolve) => child.once('exit', resolve));
  child.kill(signal);
  return code;
}

/** Puts a file into the service, as the product's server would, and a block of it into an entry. */
async function entryWithFile(seed: number, size: { tracks: number; frames: number }): Promise<string> {
  const data = simulateDataSet({
    seed,
    ...size,
    field: 50,
    missing: 0,
    physics: () => ({ D: 0.4, interval: 0.02, exposure: 0, sigma: 0.02, velocity: [0, 0], box: null }),
  });
  const bytes = Buffer.from(toCsv(data));
  Object.assign(process.env, environment);
  const api = new UTApi({ token: environment.UPLOADTHING_TOKEN });
  // The SDK warns of old fields in its own answer.
  const warned = vi.spyOn(console, 'warn').mockImplementation(() => undefined);
  const stored = await api.uploadFiles(new UTFile([bytes], 'tracks.csv'));
  warned.mockRestore();
  if (!stored.data) throw new Error(stored.error.message);
  const entryId = await world.newEntry();
  const readingId = await world.addReading(entryId, 'tracks.csv', { bytes, storageKey: stored.data.key });
  await world.append(entryId, block({ readingIds: [readingId] }));
  return entryId;
}

test('fetches a file from the service, analyses it, and ends in order when asked', async () => {
  const entryId = await entryWithFile(1, { tracks: 20, frames: 50 });
  begin();
  await world.wait(entryId, 'done');
  const [row] = await world.blocks(entryId);
  // The simulated truth lies within its interval; the seed is fixed, so this is no game of chance.
  expect(row!.dLo!).toBeLessThan(0.4);
  expect(row!.dHi!).toBeGreaterThan(0.4);
  expect(await end('SIGTERM')).toBe(0);
});

test('killed in the middle of an analysis, the next one finishes it', async () => {
  begin();
  const entryId = await entryWithFile(2, { tracks: 400, frames: 400 });
  await world.wait(entryId, 'waiting');
  await end('SIGKILL');
  // It was under way: nothing of it is there, and nothing half.
  expect(await world.results()).toBe(1);
  expect(await world.blocks(entryId)).toMatchObject([{ status: 'waiting', d: null, address: null }]);
  await world.append(entryId, paragraph('Written while nobody followed.'));
  begin();
  await world.wait(entryId, 'done');
  expect(await world.text(entryId)).toBe('Written while nobody followed.');
});

test('without the file service it says so on the page; without a copy of its own nothing is lost', async () => {
  const entryId = await entryWithFile(3, { tracks: 5, frames: 20 });
  await world.wait(entryId, 'done');
  await end('SIGKILL');
  const later = await entryWithFile(4, { tracks: 5, frames: 20 });
  const { port } = service;
  await service.stop();
  begin();
  await until('the block says why it waits', async () => {
    const [row] = await world.blocks(later);
    return row?.status === 'waiting' && row.message.includes('file service');
  });
  service = await startFileService({ port, folder: path.join(folder, 'files'), ...key });
  await world.wait(later, 'done');
});
