import 'server-only';
import { createUploadthing, type FileRouter } from 'uploadthing/next';
import { UploadThingError } from 'uploadthing/server';
import { z } from 'zod';
import { findCurrentActor } from '@/app/_server/actor';
import { refuse } from '@/app/_server/refuse';
import { fileAccess } from '@/app/_server/services/files';
import { db } from '@/db/client';
import { finishUpload } from '@/db/commands/file/finish-upload';
import { startUpload } from '@/db/commands/file/start-upload';
import { env } from '@/db/env';
import { AppError } from '@/db/errors';
import { fetchFromService, sha256 } from '@/db/files/open-stored-file';
import { MAX_UPLOAD_BYTES, MAX_UPLOAD_SIZE } from '@/db/files/policy';

const build = createUploadthing({
  errorFormatter: (error) => ({ message: error.message }),
});

/** Turns any fault into one that the SDK passes on with its sentence. */
function asUploadError(error: unknown): UploadThingError {
  const { status, sentence } = refuse(error, 'upload');
  const code =
    status === 401 || status === 403
      ? 'FORBIDDEN'
      : status === 404
        ? 'NOT_FOUND'
        : status === 413
          ? 'TOO_LARGE'
          : status >= 500
            ? 'INTERNAL_SERVER_ERROR'
            : 'BAD_REQUEST';
  return new UploadThingError({ code, message: sentence });
}

/** Uploads that the product knows. The content decides what a file is, so any declared type may come. */
export const uploads = {
  trajectory: build({
    blob: { maxFileSize: MAX_UPLOAD_SIZE, maxFileCount: 1, contentDisposition: 'attachment' },
  })
    .input(z.object({ entryId: z.uuid() }))
    .middleware(async ({ req, files, input }) => {
      try {
        if (req.headers.get('origin') !== new URL(env().NEXTAUTH_URL).origin)
          throw new AppError('foreign-origin');
        const actor = await findCurrentActor();
        if (!actor) throw new AppError('not-signed-in');
        const [file, ...more] = files;
        if (!file || more.length > 0)
          throw new AppError('bad-input', { sentence: 'Files are taken one by one.' });
        if (file.size > MAX_UPLOAD_BYTES) {
          const size = (file.size / 1024 / 1024).toFixed(1);
          throw new AppError('too-big', {
            sentence: `"${file.name}" has ${size} MB; up to ${MAX_UPLOAD_BYTES / 1024 / 1024} MB can be read at the moment. Export fewer columns or fewer tracks, or split it.`,
          });
        }
        if (!Number.isInteger(file.size) || file.size < 0)
          throw new AppError('bad-input', { sentence: 'The size of the file is not a number of bytes.' });
        return await startUpload(db(), actor, { entryId: input.entryId, name: file.name, bytes: file.size });
      } catch (error) {
        throw asUploadError(error);
      }
    })
    .onUploadComplete(async ({ metadata, file }) => {
      try {
        // Size and hash are measured on what the service really stores; nothing that the browser said counts.
        const bytes = await fetchFromService(file.key, fileAccess());
        const finished = await finishUpload(db(), {
          ticketId: metadata.ticketId,
          storageKey: file.key,
          mediaType: 'application/octet-stream',
          bytes: bytes.length,
          sha256: sha256(bytes),
        });
        return { ...finished };
      } catch (error) {
        // The browser waits elsewhere; what is not said here is said nowhere.
        if (!(error instanceof AppError)) refuse(error, 'upload callback');
        else {
          console.error(`upload callback: ${error.code}, ${error.message}`);
          // It would be refused again however often it is told; the rest may mend itself, so it is not answered.
          if (error.status < 500) return { refused: error.sentence };
        }
        throw error;
      }
    }),
} satisfies FileRouter;

export type Uploads = typeof uploads;
