import { eq } from 'drizzle-orm';
import type { Connection } from '../../client';
import { AppError } from '../../errors';
import type { Actor } from '../../policies/may';
import { notebook } from '../../schema/index';
import { selectNotebooks, type NotebookSummary } from './list-notebooks';

/** One notebook. @throws AppError not-found - no such notebook, or the actor may not know that it exists. */
export async function getNotebook(
  db: Connection,
  actor: Actor,
  notebookId: string,
): Promise<NotebookSummary> {
  const [found] = await selectNotebooks(db, actor, eq(notebook.id, notebookId));
  if (!found) throw new AppError('not-found');
  return found;
}
