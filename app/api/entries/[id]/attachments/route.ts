import { z } from 'zod';
import { route } from '@/app/_server/route';
import { db } from '@/db/client';
import { listAttachments } from '@/db/queries/file/list-attachments';

export const GET = route('attachments', { params: z.object({ id: z.uuid() }) }, ({ actor, params }) =>
  listAttachments(db(), actor, params.id),
);
