import { sql, type SQL, type SQLWrapper } from 'drizzle-orm';
import type { Actor } from './may';

/**
 * The rule 'notebook.read' (and with it 'entry.read') of may.ts as SQL, so that lists are filtered by the database: what
 * somebody may not read is never fetched, counted or paged over. Whether the account is active is asked again here,
 * because an actor may have been deactivated since the request began.
 */

/** Subquery with one column, `notebook_id`: every notebook that the actor may read. Use as `… in ${…}` or `from ${…} nb`. */
export function readableNotebooks(actor: Actor): SQL {
  return sql`(select m.notebook_id from notebook_member m join person p on p.id = m.person_id
    where m.person_id = ${actor.personId}::uuid and p.active)`;
}

/** Condition: the notebook named by `notebookId` (a column or a value) is one that the actor may read. */
export function mayReadNotebook(actor: Actor, notebookId: SQLWrapper): SQL {
  return sql`${notebookId} in ${readableNotebooks(actor)}`;
}
