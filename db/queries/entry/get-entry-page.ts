import { eq } from 'drizzle-orm';
import type { Connection } from '../../client';
import { AppError } from '../../errors';
import { may, type Actor, type EntryState } from '../../policies/may';
import { entry, person } from '../../schema/index';
import { entryPeople } from './entry-people';
import { getEntryFor } from './get-entry-for';

/** What an entry's page shows around its body. */
export interface EntryPage {
  readonly id: string;
  readonly notebookId: string;
  readonly notebookCode: string;
  readonly notebookTitle: string;
  readonly number: number;
  readonly title: string;
  readonly experimentDate: string;
  readonly state: EntryState;
  readonly epoch: number;
  /** Authors by their printed names, who started it first. */
  readonly people: string[];
  readonly startedBy: string;
  readonly startedAt: Date;
  readonly editedAt: Date;
  readonly archived: boolean;
  readonly may: { readonly write: boolean; readonly attach: boolean };
}

/** @throws AppError not-found - no such entry, or the actor may not know that it exists. */
export async function getEntryPage(db: Connection, actor: Actor, entryId: string): Promise<EntryPage> {
  const found = await getEntryFor(db, actor, entryId, 'entry.read');
  const [more] = await db
    .select({ people: entryPeople, startedBy: person.name, editedAt: entry.editedAt })
    .from(entry)
    .innerJoin(person, eq(person.id, entry.createdBy))
    .where(eq(entry.id, entryId));
  if (!more) throw new AppError('not-found');
  return {
    id: found.id,
    notebookId: found.notebookId,
    notebookCode: found.notebookCode,
    notebookTitle: found.notebookTitle,
    number: found.number,
    title: found.title,
    experimentDate: found.experimentDate,
    state: found.state,
    epoch: found.epoch,
    people: more.people,
    startedBy: more.startedBy,
    startedAt: found.createdAt,
    editedAt: more.editedAt,
    archived: found.archivedAt !== null,
    may: {
      write: may(actor, 'entry.write', found.thing),
      attach: may(actor, 'attachment.add', found.thing),
    },
  };
}
