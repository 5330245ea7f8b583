'use client';

import { generateReactHelpers } from '@uploadthing/react';
import type { Uploads } from '@/app/api/uploadthing/core';

const { uploadFiles } = generateReactHelpers<Uploads>();

export interface UploadedFile {
  readonly attachmentId: string;
  readonly name: string;
  readonly bytes: number;
}

/**
 * Sends one file to an entry through the upload service.
 * @param onProgress - per cent, 0 to 100.
 * @throws Error whose message is a sentence for the person.
 */
export async function uploadFile(
  file: File,
  entryId: string,
  onProgress: (percent: number) => void,
  signal: AbortSignal,
): Promise<UploadedFile> {
  try {
    const [done] = await uploadFiles('trajectory', {
      files: [file],
      input: { entryId },
      signal,
      onUploadProgress: ({ progress }) => onProgress(progress),
    });
    if (!done?.serverData) throw new Error('the file service gave no answer');
    if ('refused' in done.serverData) throw new Error(done.serverData.refused);
    const { attachmentId, name, bytes } = done.serverData;
    return { attachmentId, name, bytes };
  } catch (error) {
    if (signal.aborted) throw new Error('The upload was stopped.', { cause: error });
    throw new Error(sentenceOf(error), { cause: error });
  }
}

function sentenceOf(error: unknown): string {
  const data = (error as { data?: { message?: unknown } }).data;
  const said = typeof data?.message === 'string' ? data.message : (error as Error).message;
  // The server's own sentences end with a full stop; the SDK's words are for programmers.
  if (/[.!]$/.test(said) && said.length > 30) return said;
  return 'The file could not be sent; nothing of it was kept. Check the connection, then choose it again.';
}
