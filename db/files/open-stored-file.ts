import { createHash, randomUUID } from 'node:crypto';
import { mkdir, open, readFile, rename, unlink } from 'node:fs/promises';
import path from 'node:path';
import { UTApi } from 'uploadthing/server';
import { AppError } from '../errors';
import { MAX_UPLOAD_BYTES } from './policy';

/** Where a file's bytes are and what they must be. */
export interface StoredFileRef {
  readonly name: string;
  readonly storageKey: string;
  readonly sha256: string;
}

export interface FileAccess {
  readonly cacheFolder: string;
  /** The upload SDK's token: address and key of the file service. */
  readonly token: string;
}

const FETCH_MS = 60_000;

/**
 * Fetches the bytes of a key from the file service, by a signed address of a few minutes.
 * @throws AppError storage-down - the service is away, or does not have it.   @throws AppError too-big - more than may be
 * uploaded comes, whatever was announced.
 */
export async function fetchFromService(storageKey: string, access: FileAccess): Promise<Buffer> {
  const api = new UTApi({ token: access.token });
  try {
    const { ufsUrl } = await api.generateSignedURL(storageKey, { expiresIn: '5 minutes' });
    const response = await fetch(ufsUrl, { signal: AbortSignal.timeout(FETCH_MS) });
    if (!response.ok) throw new Error(`the file service answered ${response.status}`);
    return await readAll(response, MAX_UPLOAD_BYTES);
  } catch (cause) {
    if (cause instanceof AppError) throw cause;
    throw new AppError('storage-down', {
      message: `file ${storageKey}: ${(cause as Error).message}`,
      sentence: 'The file service cannot be reached at the moment. The file is safe there; try again.',
      cause,
    });
  }
}

/** Counts while it reads: a length that is only announced must not decide how much memory is taken. */
async function readAll(response: Response, most: number): Promise<Buffer> {
  const pieces: Uint8Array[] = [];
  let size = 0;
  for await (const piece of response.body ?? []) {
    size += piece.length;
    if (size > most) throw new AppError('too-big');
    pieces.push(piece);
  }
  return Buffer.concat(pieces);
}

/**
 * The bytes of a stored file, verified against the hash that was measured when it arrived. A verified copy is kept under
 * its hash; a copy that has gone bad is fetched anew.
 * @throws AppError storage-down - the service is away.   @throws AppError unreadable - the bytes are not those of the record.
 */
export async function openStoredFile(file: StoredFileRef, access: FileAccess): Promise<Buffer> {
  const copy = path.join(access.cacheFolder, file.sha256.slice(0, 2), file.sha256);
  const kept = await readFile(/* turbopackIgnore: true */ copy).catch(() => null);
  if (kept && sha256(kept) === file.sha256) return kept;
  const bytes = await fetchFromService(file.storageKey, access);
  if (sha256(bytes) !== file.sha256) {
    throw new AppError('unreadable', {
      message: `file ${file.storageKey} does not have the hash of the record`,
      sentence: `The stored bytes of "${file.name}" are not those that were recorded when it was uploaded. Nothing was computed from them; tell your administrator.`,
    });
  }
  await keep(copy, bytes).catch((error: Error) =>
    console.error(`no copy of a file could be kept: ${error.message}`),
  );
  return bytes;
}

export const sha256 = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex');

/** Written under another name, synced and then renamed, so that a copy is whole or not there. */
async function keep(file: string, bytes: Buffer): Promise<void> {
  await mkdir(path.dirname(file), { recursive: true });
  const temporary = `${file}.${randomUUID()}`;
  const handle = await open(/* turbopackIgnore: true */ temporary, 'wx');
  try {
    await handle.writeFile(bytes);
    await handle.sync();
  } finally {
    await handle.close();
  }
  await rename(temporary, file).catch(async (error: unknown) => {
    await unlink(temporary).catch(() => undefined);
    throw error;
  });
}
