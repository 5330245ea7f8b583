import { and, eq } from 'drizzle-orm';
import type { Connection } from '../../client';
import { AppError } from '../../errors';
import { may, type Actor, type InEntry } from '../../policies/may';
import { entry, notebook, notebookMember } from '../../schema/index';

export type EntryAction =
  'entry.read' | 'entry.write' | 'attachment.read' | 'attachment.add' | 'reading.create';

/**
 * The entry with the actor's place in its notebook, after the policy has allowed `action`.
 * @param options.lock - locks the entry's row until the transaction ends.
 * @throws AppError not-found - no such entry, or the actor may not know that it exists.
 * @throws AppError forbidden | locked - may read it but not do this.
 */
export async function getEntryFor(
  db: Connection,
  actor: Actor,
  entryId: string,
  action: EntryAction,
  options: { lock?: boolean } = {},
) {
  const query = db
    .select({
      id: entry.id,
      number: entry.number,
      title: entry.title,
      experimentDate: entry.experimentDate,
      state: entry.state,
      epoch: entry.epoch,
      lock: entry.lock,
      headSeq: entry.headSeq,
      createdBy: entry.createdBy,
      createdAt: entry.createdAt,
      notebookId: entry.notebookId,
      notebookCode: notebook.code,
      notebookTitle: notebook.title,
      archivedAt: notebook.archivedAt,
      member: notebookMember.role,
    })
    .from(entry)
    .innerJoin(notebook, eq(notebook.id, entry.notebookId))
    .leftJoin(
      notebookMember,
      and(eq(notebookMember.notebookId, entry.notebookId), eq(notebookMember.personId, actor.personId)),
    )
    .where(eq(entry.id, entryId));
  const [row] = options.lock ? await query.for('update', { of: entry }) : await query;
  const thing: InEntry | null = row
    ? { member: row.member, state: row.state, archived: row.archivedAt !== null }
    : null;
  if (!row || !thing || !may(actor, 'entry.read', thing)) throw new AppError('not-found');
  if (!may(actor, action, thing)) throw new AppError(row.state === 'draft' ? 'forbidden' : 'locked');
  return { ...row, thing };
}
