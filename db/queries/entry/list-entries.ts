import { and, desc, eq, lt } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { Actor, EntryState } from '../../policies/may';
import { mayReadNotebook } from '../../policies/notebook-filter';
import { entry, notebook } from '../../schema/index';
import { entryPeople } from './entry-people';
import { entryResultCount, entryResults, type LedgerResult } from './entry-results';

/** One line of a ledger of entries. */
export interface LedgerEntry {
  readonly id: string;
  readonly notebookCode: string;
  readonly number: number;
  /** May be empty. */
  readonly title: string;
  readonly experimentDate: string;
  readonly state: EntryState;
  readonly people: string[];
  readonly results: LedgerResult[];
  readonly resultCount: number;
}

export const ledgerColumns = {
  id: entry.id,
  notebookCode: notebook.code,
  number: entry.number,
  title: entry.title,
  experimentDate: entry.experimentDate,
  state: entry.state,
  people: entryPeople,
  results: entryResults,
  resultCount: entryResultCount,
};

export const LEDGER_PAGE_ROWS = 40;

/**
 * A page of a notebook's entries, newest number first.
 * @param options.before - number of the last entry of the page before; null for the first page.
 * @returns `next`: give it as `before` for the next page; null when this is the last. Empty for somebody who may not read it.
 */
export async function listEntries(
  db: Connection,
  actor: Actor,
  options: { notebookId: string; before: number | null; limit?: number },
): Promise<{ entries: LedgerEntry[]; next: number | null }> {
  const limit = options.limit ?? LEDGER_PAGE_ROWS;
  const found = await db
    .select(ledgerColumns)
    .from(entry)
    .innerJoin(notebook, eq(notebook.id, entry.notebookId))
    .where(
      and(
        eq(entry.notebookId, options.notebookId),
        mayReadNotebook(actor, entry.notebookId),
        options.before === null ? undefined : lt(entry.number, options.before),
      ),
    )
    .orderBy(desc(entry.number))
    .limit(limit + 1);
  const entries = found.slice(0, limit);
  return { entries, next: found.length > limit ? (entries.at(-1)?.number ?? null) : null };
}
