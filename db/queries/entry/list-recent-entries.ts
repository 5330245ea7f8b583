import { and, desc, eq, sql } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { Actor } from '../../policies/may';
import { mayReadNotebook } from '../../policies/notebook-filter';
import { entry, notebook } from '../../schema/index';
import { ledgerColumns, type LedgerEntry } from './list-entries';

/** The actor had a hand in it: started it, or an edit of theirs reached it. */
const isMine = (actor: Actor) => sql`(${entry.createdBy} = ${actor.personId}
  or exists (select 1 from entry_client c where c.entry_id = ${entry.id} and c.person_id = ${actor.personId}
    and exists (select 1 from entry_update u where u.entry_id = ${entry.id} and u.person_id = ${actor.personId})))`;

/**
 * Entries that the actor may read, last edited first.
 * @param options.whose - 'mine': drafts that the actor works on; 'others': entries, in any state, that they have no hand in.
 */
export async function listRecentEntries(
  db: Connection,
  actor: Actor,
  options: { whose: 'mine' | 'others'; limit: number },
): Promise<LedgerEntry[]> {
  const mine = isMine(actor);
  return db
    .select(ledgerColumns)
    .from(entry)
    .innerJoin(notebook, eq(notebook.id, entry.notebookId))
    .where(
      and(
        mayReadNotebook(actor, entry.notebookId),
        options.whose === 'mine' ? and(eq(entry.state, 'draft'), mine) : sql`not ${mine}`,
      ),
    )
    .orderBy(desc(entry.editedAt), desc(entry.id))
    .limit(options.limit);
}
