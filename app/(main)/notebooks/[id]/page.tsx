import type { Metadata } from 'next';
import Link from 'next/link';
import { startEntryAction } from '@/app/(main)/actions';
import { Ledger } from '@/components/notebook/ledger';
import { MemberLine } from '@/components/notebook/member-line';
import { Members } from '@/components/notebook/members';
import { StartEntry } from '@/components/notebook/start-entry';
import { Place } from '@/components/shell/place';
import { EmptyPlace } from '@/components/ui/empty-place';
import { Notice } from '@/components/ui/notice';
import { WalkMark } from '@/components/ui/walk-mark';
import { db } from '@/db/client';
import { listMembers } from '@/db/queries/notebook/list-members';
import { listEntries } from '@/db/queries/entry/list-entries';
import { addMemberAction, changeMemberAction } from './actions';
import { loadNotebook } from './load-notebook';

type Props = {
  params: Promise<{ id: string }>;
  searchParams: Promise<Record<string, string | string[] | undefined>>;
};

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const { notebook } = await loadNotebook((await params).id);
  return { title: `${notebook.code}, ${notebook.title}` };
}

export default async function NotebookPage({ params, searchParams }: Props) {
  const { actor, notebook } = await loadNotebook((await params).id);
  const before = readNumber((await searchParams).before);
  const [{ entries, next }, members] = await Promise.all([
    listEntries(db(), actor, { notebookId: notebook.id, before }),
    listMembers(db(), actor, notebook.id),
  ]);
  return (
    <Place>
      <header className="flex gap-5 tab:gap-7">
        <WalkMark digits={notebook.id} size={72} className="mt-1 text-malachite max-tab:size-12" />
        <div className="min-w-0">
          <p className="label text-muted">{notebook.code}</p>
          <h1 className="mt-0.5 text-title">{notebook.title}</h1>
          {notebook.description ? (
            <p className="mt-2 max-w-measure text-text text-muted">{notebook.description}</p>
          ) : null}
          <MemberLine members={notebook.members} />
          {members ? (
            <Members
              notebookId={notebook.id}
              members={members}
              add={addMemberAction}
              change={changeMemberAction}
            />
          ) : null}
        </div>
      </header>
      <div className="mt-8">
        {notebook.archived ? (
          <Notice>This notebook is archived: it can be read, and nothing in it can be changed.</Notice>
        ) : notebook.may.startEntry ? (
          <StartEntry
            places={[notebook].map(({ id, code, title, todays }) => ({ id, code, title, todays }))}
            start={startEntryAction}
            named={false}
          />
        ) : null}
      </div>
      <section aria-label="Entries" className="mt-10">
        {before === null ? null : (
          <p className="small mb-3">
            <Link href={`/notebooks/${notebook.id}`} className="link">
              Back to the newest entries
            </Link>
          </p>
        )}
        {entries.length > 0 ? (
          <Ledger lines={entries} label={`Entries of ${notebook.title}`} />
        ) : (
          <EmptyPlace>
            {before === null
              ? 'Each experiment day becomes an entry here, with its number, its authors and what was measured.'
              : 'There are no earlier entries.'}
          </EmptyPlace>
        )}
        {next === null ? null : (
          <p className="small mt-4">
            <Link href={`/notebooks/${notebook.id}?before=${next}`} className="link">
              Earlier entries
            </Link>
          </p>
        )}
      </section>
    </Place>
  );
}

/** A place in the list; anything that is no number means its start. */
function readNumber(text: string | string[] | undefined): number | null {
  return typeof text === 'string' && /^\d{1,9}$/.test(text) ? Number(text) : null;
}
