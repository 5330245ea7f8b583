import 'server-only';
import { env } from '@/db/env';
import { openStoredFile, type FileAccess, type StoredFileRef } from '@/db/files/open-stored-file';

export function fileAccess(): FileAccess {
  return { cacheFolder: env().MOTEBOOK_CACHE, token: env().UPLOADTHING_TOKEN };
}

/** Verified bytes of a stored file. @throws AppError, see openStoredFile. */
export function readStoredFile(file: StoredFileRef): Promise<Buffer> {
  return openStoredFile(file, fileAccess());
}
