import type { Database } from '../../client';
import type { RenameEntryInput } from '../../inputs/entry';
import type { Actor } from '../../policies/may';
import { changeEntry } from './change-entry';

/** Gives an entry another title; see `changeEntry` for what happens when two people do so at once. */
export async function renameEntry(
  db: Database,
  actor: Actor,
  input: RenameEntryInput,
): Promise<{ title: string }> {
  const { entryId, title } = input;
  await changeEntry(db, actor, { entryId, column: 'title', value: title, kind: 'entry.rename' });
  return { title };
}
