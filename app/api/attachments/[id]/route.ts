import { z } from 'zod';
import { route } from '@/app/_server/route';
import { readStoredFile } from '@/app/_server/services/files';
import { db } from '@/db/client';
import { attachmentDisposition } from '@/db/files/safe-name';
import { getAttachmentFor } from '@/db/queries/file/get-attachment-for';

/** A file for download, exactly as it was uploaded. Whatever it contains, a browser only ever saves it. */
export const GET = route('attachment', { params: z.object({ id: z.uuid() }) }, async ({ actor, params }) => {
  const file = await getAttachmentFor(db(), actor, params.id, 'attachment.read');
  const bytes = await readStoredFile(file);
  return new Response(new Uint8Array(bytes), {
    headers: {
      'Content-Type': 'application/octet-stream',
      'Content-Length': String(bytes.length),
      'Content-Disposition': attachmentDisposition(file.name),
      'Content-Security-Policy': "sandbox; default-src 'none'",
      'X-Content-Type-Options': 'nosniff',
      'Cross-Origin-Resource-Policy': 'same-origin',
      'Cache-Control': 'private, no-store',
    },
  });
});
