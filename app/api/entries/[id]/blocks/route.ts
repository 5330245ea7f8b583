import { z } from 'zod';
import { route } from '@/app/_server/route';
import { db } from '@/db/client';
import { blockAnswer } from '@/db/inputs/block-answer';
import { listBlocks } from '@/db/queries/block/list-blocks';

export const GET = route('blocks', { params: z.object({ id: z.uuid() }) }, async ({ actor, params }) =>
  blockAnswer.parse(await listBlocks(db(), actor, params.id)),
);
