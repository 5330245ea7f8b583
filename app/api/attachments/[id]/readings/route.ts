import { z } from 'zod';
import { route } from '@/app/_server/route';
import { analysisWorker } from '@/app/_server/services/analysis-worker';
import { readStoredFile } from '@/app/_server/services/files';
import { readingFault } from '@/app/_server/services/reading-fault';
import { db } from '@/db/client';
import { makeReading } from '@/db/commands/file/make-reading';
import { readingRequest } from '@/db/inputs/intake';
import { getAttachmentFor } from '@/db/queries/file/get-attachment-for';

/** Confirms how a file is read. The server reads it itself first: a reading that reads nothing is never kept. */
export const POST = route(
  'reading',
  { params: z.object({ id: z.uuid() }), body: readingRequest },
  async ({ actor, params, body }) => {
    const file = await getAttachmentFor(db(), actor, params.id, 'reading.create');
    const read = await analysisWorker().run<'read'>({
      kind: 'read',
      bytes: await readStoredFile(file),
      spec: body.spec,
    });
    if (read.failed) throw readingFault(read);
    return makeReading(db(), actor, {
      attachmentId: file.id,
      spec: body.spec,
      summary: read.summary,
      problems: read.problemCount,
    });
  },
);
