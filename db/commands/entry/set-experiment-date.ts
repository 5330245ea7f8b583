import type { Database } from '../../client';
import type { SetExperimentDateInput } from '../../inputs/entry';
import type { Actor } from '../../policies/may';
import { changeEntry } from './change-entry';

/** Says on which of the lab's days the experiment was; see `changeEntry`. When the entry was begun stays on record. */
export async function setExperimentDate(
  db: Database,
  actor: Actor,
  input: SetExperimentDateInput,
): Promise<{ experimentDate: string }> {
  const { entryId, experimentDate } = input;
  await changeEntry(db, actor, {
    entryId,
    column: 'experimentDate',
    value: experimentDate,
    kind: 'entry.date',
  });
  return { experimentDate };
}
