'use server';

import { action } from '@/app/_server/action';
import { db } from '@/db/client';
import { renameEntry } from '@/db/commands/entry/rename-entry';
import { setExperimentDate } from '@/db/commands/entry/set-experiment-date';
import { renameEntryInput, setExperimentDateInput } from '@/db/inputs/entry';

export const renameEntryAction = action('rename-entry', renameEntryInput, (actor, input) =>
  renameEntry(db(), actor, input),
);

export const setExperimentDateAction = action('set-experiment-date', setExperimentDateInput, (actor, input) =>
  setExperimentDate(db(), actor, input),
);
