import 'server-only';
import { notFound } from 'next/navigation';
import { cache } from 'react';
import { z } from 'zod';
import { getCurrentActor } from '@/app/_server/actor';
import { orNotFound } from '@/app/_server/or-not-found';
import { db } from '@/db/client';
import { getNotebook } from '@/db/queries/notebook/get-notebook';

/** The notebook of this address with whoever asks; asked once a request. Unknown or not theirs: not found. */
export const loadNotebook = cache(async (id: string) => {
  const actor = await getCurrentActor();
  if (!z.uuid().safeParse(id).success) notFound();
  return { actor, notebook: await orNotFound(getNotebook(db(), actor, id)) };
});
