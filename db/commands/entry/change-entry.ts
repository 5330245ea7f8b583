import { eq } from 'drizzle-orm';
import type { Database } from '../../client';
import type { Actor } from '../../policies/may';
import { getEntryFor } from '../../queries/entry/get-entry-for';
import { audit, entry } from '../../schema/index';

/**
 * Changes one column of an entry's head that belongs to no document: its title or its date. The row is locked; of two
 * people who change it at the same time the later wins, and the audit keeps both, each with what was there before.
 * Writing what is there already changes and records nothing.
 * @throws AppError not-found | forbidden | locked - as the policy says.
 */
export async function changeEntry<Column extends 'title' | 'experimentDate'>(
  db: Database,
  actor: Actor,
  change: { entryId: string; column: Column; value: string; kind: string },
): Promise<void> {
  await db.transaction(async (tx) => {
    const found = await getEntryFor(tx, actor, change.entryId, 'entry.write', { lock: true });
    if (found[change.column] === change.value) return;
    await tx
      .update(entry)
      .set({ [change.column]: change.value })
      .where(eq(entry.id, change.entryId));
    await tx.insert(audit).values({
      kind: change.kind,
      personId: actor.personId,
      loginId: actor.loginId,
      notebookId: found.notebookId,
      entryId: change.entryId,
      before: { [change.column]: found[change.column] },
      after: { [change.column]: change.value },
    });
  });
}
