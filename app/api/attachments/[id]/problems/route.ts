import { z } from 'zod';
import { route } from '@/app/_server/route';
import { analysisWorker } from '@/app/_server/services/analysis-worker';
import { readStoredFile } from '@/app/_server/services/files';
import { readingFault } from '@/app/_server/services/reading-fault';
import { db } from '@/db/client';
import { toSafeCsv } from '@/db/files/csv';
import { attachmentDisposition } from '@/db/files/safe-name';
import { readingRequest } from '@/db/inputs/intake';
import { getAttachmentFor } from '@/db/queries/file/get-attachment-for';

/** The rows that a reading could not use, with line and reason, as a file to keep. */
export const POST = route(
  'problems',
  { params: z.object({ id: z.uuid() }), body: readingRequest },
  async ({ actor, params, body }) => {
    const file = await getAttachmentFor(db(), actor, params.id, 'attachment.read');
    const read = await analysisWorker().run<'read'>({
      kind: 'read',
      bytes: await readStoredFile(file),
      spec: body.spec,
    });
    if (read.failed) throw readingFault(read);
    const rows = read.problems.map((problem) => [problem.line, problem.reason, problem.text]);
    return new Response(toSafeCsv(['line', 'reason', 'text'], rows), {
      headers: {
        'Content-Type': 'text/csv; charset=utf-8',
        'Content-Disposition': attachmentDisposition(`${file.name}-unusable-rows.csv`),
        'X-Content-Type-Options': 'nosniff',
        'Cache-Control': 'private, no-store',
      },
    });
  },
);
