'use client';

import Link from 'next/link';
import { useCallback } from 'react';
import { EntryDate } from './entry-date';
import { EntryNumber } from './entry-number';
import { EntryTitle } from './entry-title';
import { inWords } from './member-line';
import type { SaveOutcome } from './use-saved-value';

export interface EntryHead {
  readonly id: string;
  readonly notebookId: string;
  readonly notebookCode: string;
  readonly notebookTitle: string;
  readonly number: number;
  readonly title: string;
  readonly experimentDate: string;
  /** Authors by name, who started it first. */
  readonly people: readonly string[];
  readonly editable: boolean;
}

/** The head of the page: number and notebook, title, day and authors. */
export function EntryHeader({
  entry,
  rename,
  setDate,
}: {
  entry: EntryHead;
  rename: (input: { entryId: string; title: string }) => Promise<SaveOutcome>;
  setDate: (input: { entryId: string; experimentDate: string }) => Promise<SaveOutcome>;
}) {
  const { id } = entry;
  const saveTitle = useCallback((title: string) => rename({ entryId: id, title }), [rename, id]);
  const saveDate = useCallback((day: string) => setDate({ entryId: id, experimentDate: day }), [setDate, id]);
  return (
    <header className="border-b pb-5 wide:pr-margin">
      <p className="label mb-2 flex flex-wrap items-center gap-x-3 text-muted max-desk:mb-0">
        <span className="font-semibold text-ink">
          <EntryNumber code={entry.notebookCode} number={entry.number} />
        </span>
        <Link
          href={`/notebooks/${entry.notebookId}`}
          className="inline-flex items-center underline-offset-4 hover:text-ink hover:underline max-desk:min-h-11"
        >
          {entry.notebookTitle}
        </Link>
      </p>
      <EntryTitle title={entry.title} editable={entry.editable} save={saveTitle} />
      <p className="small mt-2 flex flex-wrap items-center gap-x-4 text-muted max-desk:mt-0">
        <EntryDate day={entry.experimentDate} editable={entry.editable} save={saveDate} />
        <span>{inWords(entry.people)}</span>
      </p>
    </header>
  );
}
