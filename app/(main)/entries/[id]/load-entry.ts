import 'server-only';
import { notFound } from 'next/navigation';
import { cache } from 'react';
import { z } from 'zod';
import { getCurrentActor } from '@/app/_server/actor';
import { orNotFound } from '@/app/_server/or-not-found';
import { db } from '@/db/client';
import { getEntryPage } from '@/db/queries/entry/get-entry-page';

/** The entry of this address with whoever asks; asked once a request. Unknown or not theirs: not found. */
export const loadEntry = cache(async (id: string) => {
  const actor = await getCurrentActor();
  if (!z.uuid().safeParse(id).success) notFound();
  return { actor, entry: await orNotFound(getEntryPage(db(), actor, id)) };
});
