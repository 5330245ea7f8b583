'use server';

import { action } from '@/app/_server/action';
import { db } from '@/db/client';
import { startEntry } from '@/db/commands/entry/start-entry';
import { startEntryInput } from '@/db/inputs/entry';

export const startEntryAction = action('start-entry', startEntryInput, async (actor, input) => {
  const { entryId } = await startEntry(db(), actor, input);
  return { entryId };
});
