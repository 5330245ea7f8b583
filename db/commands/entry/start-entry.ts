import { and, eq, sql } from 'drizzle-orm';
import type { Database, Transaction } from '../../client';
import { AppError } from '../../errors';
import type { StartEntryInput } from '../../inputs/entry';
import { may, type Actor } from '../../policies/may';
import { findTodaysEntry } from '../../queries/entry/find-todays-entry';
import { getLab } from '../../queries/lab/get-lab';
import { audit, notebook, notebookMember } from '../../schema/index';
import { seedEntry } from './write-document';

/**
 * Starts the actor's entry for the lab's day in a notebook, or finds the one they have already: asking twice, also at the
 * same moment from two windows, gives one entry. The notebook's row is locked, so numbers are gap-free and never used twice.
 * @returns the entry, and whether it was made now.
 * @throws AppError not-found | forbidden - the notebook is not theirs to see, or to write in.
 */
export async function startEntry(
  db: Database,
  actor: Actor,
  input: StartEntryInput,
): Promise<{ entryId: string; number: number; started: boolean }> {
  return db.transaction(async (tx) => {
    await lockNotebookFor(tx, actor, input.notebookId);
    const mine = await findTodaysEntry(tx, actor, input.notebookId);
    if (mine) return { entryId: mine.id, number: mine.number, started: false };

    const { today } = await getLab(tx);
    const [numbered] = await tx
      .update(notebook)
      .set({ lastNumber: sql`${notebook.lastNumber} + 1` })
      .where(eq(notebook.id, input.notebookId))
      .returning({ number: notebook.lastNumber });
    if (!numbered) throw new Error('a locked notebook is gone');
    // In SQL, because this role may insert these columns only; the others keep their defaults.
    const { rows } = await tx.execute<{ id: string }>(sql`
      INSERT INTO entry (notebook_id, number, title, experiment_date, created_by)
      VALUES (${input.notebookId}, ${numbered.number}, '', ${today}, ${actor.personId}) RETURNING id`);
    const entryId = rows[0]?.id;
    if (!entryId) throw new Error('insert of an entry returned no row');
    await seedEntry(tx, { entryId, actor });
    await tx.insert(audit).values({
      kind: 'entry.start',
      personId: actor.personId,
      loginId: actor.loginId,
      notebookId: input.notebookId,
      entryId,
      after: { number: numbered.number, experimentDate: today },
    });
    return { entryId, number: numbered.number, started: true };
  });
}

async function lockNotebookFor(tx: Transaction, actor: Actor, notebookId: string): Promise<void> {
  const [row] = await tx
    .select({ archivedAt: notebook.archivedAt, member: notebookMember.role })
    .from(notebook)
    .leftJoin(
      notebookMember,
      and(eq(notebookMember.notebookId, notebook.id), eq(notebookMember.personId, actor.personId)),
    )
    .where(eq(notebook.id, notebookId))
    .for('update', { of: notebook });
  const thing = row && { member: row.member, archived: row.archivedAt !== null };
  if (!thing || !may(actor, 'notebook.read', thing)) throw new AppError('not-found');
  if (may(actor, 'entry.create', thing)) return;
  throw thing.archived
    ? new AppError('forbidden', { sentence: 'This notebook is archived; no new entries are started in it.' })
    : new AppError('forbidden');
}
