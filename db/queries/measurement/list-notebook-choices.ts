import { asc } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { Actor } from '../../policies/may';
import { mayReadNotebook } from '../../policies/notebook-filter';
import { notebook } from '../../schema/index';

/** The notebooks that the actor may read, by code: what a search can be narrowed to. */
export async function listNotebookChoices(
  db: Connection,
  actor: Actor,
): Promise<{ id: string; code: string; title: string }[]> {
  return db
    .select({ id: notebook.id, code: notebook.code, title: notebook.title })
    .from(notebook)
    .where(mayReadNotebook(actor, notebook.id))
    .orderBy(asc(notebook.code));
}
