import { createHash, randomBytes } from 'node:crypto';
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, beforeEach, expect, test, vi } from 'vitest';
import { AppError } from '../../../db/errors';
import { fetchFromService, openStoredFile, type FileAccess } from '../../../db/files/open-stored-file';
import { MAX_UPLOAD_BYTES } from '../../../db/files/policy';
import { RunningFake } from '../../app/fakes/running-fake';

/** Copies of stored files, kept and verified; the real SDK against the local file service as a process. */
let folder: string;
let fake: RunningFake;
let access: FileAccess;
beforeAll(async () => {
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-copies-'));
  fake = await RunningFake.start(path.join(folder, 'files'));
  Object.assign(process.env, fake.environment);
});
afterAll(async () => {
  await fake.end('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
});
beforeEach(() => {
  access = {
    cacheFolder: mkdtempSync(path.join(folder, 'cache-')),
    token: fake.environment.UPLOADTHING_TOKEN!,
  };
});

const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');
async function storedFile(bytes = randomBytes(20_000)) {
  return { bytes, ref: { name: 'tracks.csv', storageKey: await fake.store(bytes), sha256: sha256(bytes) } };
}
const copies = () =>
  readdirSync(access.cacheFolder, { recursive: true, withFileTypes: true })
    .filter((one) => one.isFile())
    .map((one) => one.name);
async function faultOf(run: Promise<unknown>): Promise<AppError> {
  const fault: unknown = await run.then(
    () => null,
    (error: unknown) => error,
  );
  if (!(fault instanceof AppError)) throw new Error(`no expected fault: ${String(fault)}`);
  return fault;
}
async function whileAway(run: () => Promise<void>): Promise<void> {
  await fake.end('SIGTERM');
  try {
    await run();
  } finally {
    await fake.begin();
  }
}

test('fetched once, then read from the copy, also while the service is away', async () => {
  const { bytes, ref } = await storedFile();
  expect((await openStoredFile(ref, access)).equals(bytes)).toBe(true);
  expect(copies()).toEqual([ref.sha256]);
  await whileAway(async () => {
    expect((await openStoredFile(ref, access)).equals(bytes)).toBe(true);
    const other = await faultOf(openStoredFile({ ...ref, sha256: 'f'.repeat(64) }, access));
    expect([other.code, other.sentence]).toEqual(['storage-down', expect.stringContaining('try again')]);
  });
});

test('a copy that has gone bad is never given out: it is fetched anew', async () => {
  const { bytes, ref } = await storedFile();
  await openStoredFile(ref, access);
  const copy = path.join(access.cacheFolder, ref.sha256.slice(0, 2), ref.sha256);
  for (const bad of [Buffer.alloc(0), bytes.subarray(1), Buffer.concat([bytes, Buffer.from([0])])]) {
    writeFileSync(copy, bad);
    expect((await openStoredFile(ref, access)).equals(bytes)).toBe(true);
    expect(readFileSync(copy).equals(bytes)).toBe(true);
  }
  writeFileSync(copy, 'bad');
  await whileAway(async () => {
    expect((await faultOf(openStoredFile(ref, access))).code).toBe('storage-down');
  });
});

test('bytes that are not those of the record are refused and not kept', async () => {
  const { ref } = await storedFile();
  const wrong = { ...ref, sha256: sha256(Buffer.from('something else')) };
  const fault = await faultOf(openStoredFile(wrong, access));
  expect(fault.code).toBe('unreadable');
  expect(fault.sentence).toContain('"tracks.csv"');
  // Where files are is no business of whoever reads the sentence.
  expect(fault.sentence).not.toContain(ref.storageKey);
  expect(copies()).toEqual([]);
});

test('asked for many times at once, there is one whole copy and nothing beside it', async () => {
  const { bytes, ref } = await storedFile();
  const all = await Promise.all(Array.from({ length: 8 }, () => openStoredFile(ref, access)));
  for (const one of all) expect(one.equals(bytes)).toBe(true);
  expect(copies()).toEqual([ref.sha256]);
});

test('a folder that cannot be written costs the copy, not the file', async () => {
  const complained = vi.spyOn(console, 'error').mockImplementation(() => undefined);
  const { bytes, ref } = await storedFile();
  const cacheFolder = path.join(access.cacheFolder, 'a-file');
  writeFileSync(cacheFolder, '');
  expect((await openStoredFile(ref, { ...access, cacheFolder })).equals(bytes)).toBe(true);
  expect(complained).toHaveBeenCalledOnce();
  complained.mockRestore();
});

test('a key that the service does not know, and a wrong key of ours, are faults of the service', async () => {
  expect((await faultOf(fetchFromService('0'.repeat(48), access))).code).toBe('storage-down');
  const { ref } = await storedFile();
  const other = { apiKey: 'sk_live_another', appId: 'testapp', regions: ['local'], ingestHost: 'localhost' };
  const token = Buffer.from(JSON.stringify(other)).toString('base64');
  const fault = await faultOf(fetchFromService(ref.storageKey, { ...access, token }));
  expect(fault.code).toBe('storage-down');
  expect(fault.message).not.toContain('signature=');
});

test('what is larger than may be uploaded is not taken in, whatever was announced', async () => {
  const largest = await storedFile(Buffer.alloc(MAX_UPLOAD_BYTES));
  expect((await openStoredFile(largest.ref, access)).length).toBe(MAX_UPLOAD_BYTES);
  const { ref } = await storedFile(Buffer.alloc(MAX_UPLOAD_BYTES + 1));
  expect((await faultOf(fetchFromService(ref.storageKey, access))).code).toBe('too-big');
});
