import { z } from 'zod';
import { route } from '@/app/_server/route';
import { analysisWorker } from '@/app/_server/services/analysis-worker';
import { readStoredFile } from '@/app/_server/services/files';
import { db } from '@/db/client';
import { intakeRequest } from '@/db/inputs/intake';
import { getAttachmentFor } from '@/db/queries/file/get-attachment-for';

/** What is understood of an attached file, and, when nothing is missing, what reading it gives. Changes nothing. */
export const POST = route(
  'intake',
  { params: z.object({ id: z.uuid() }), body: intakeRequest },
  async ({ actor, params, body }) => {
    const file = await getAttachmentFor(db(), actor, params.id, 'attachment.read');
    const bytes = await readStoredFile(file);
    return analysisWorker().run<'intake'>({
      kind: 'intake',
      bytes,
      name: file.name,
      spec: body.spec ?? null,
      stated: body.stated ?? {},
    });
  },
);
