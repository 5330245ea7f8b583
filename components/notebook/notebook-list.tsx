import Link from 'next/link';
import { formatDay } from '@/components/ui/format-date';
import { WalkMark } from '@/components/ui/walk-mark';
import type { NotebookSummary } from '@/db/queries/notebook/list-notebooks';

/** Notebooks as a ruled list, each with the walk of its id. */
export function NotebookList({ notebooks }: { notebooks: readonly NotebookSummary[] }) {
  return (
    <ul className="divide-y border-y">
      {notebooks.map((notebook) => (
        <li key={notebook.id} className="group relative flex gap-4 py-5 hover:bg-page tab:gap-6">
          <WalkMark digits={notebook.id} size={44} className="mt-1 text-malachite" />
          <div className="min-w-0 grow">
            <p className="flex flex-wrap items-baseline gap-x-3">
              <span className="label text-muted">{notebook.code}</span>
              <Link
                href={`/notebooks/${notebook.id}`}
                className="text-lead leading-snug decoration-1 underline-offset-4 group-hover:underline after:absolute after:inset-0"
              >
                {notebook.title}
              </Link>
            </p>
            {notebook.description ? (
              <p className="mt-1 max-w-measure text-[0.9375rem] leading-normal text-muted">
                {notebook.description}
              </p>
            ) : null}
            <p className="label mt-2 text-muted">{factsOf(notebook)}</p>
          </div>
        </li>
      ))}
    </ul>
  );
}

function factsOf({ entryCount, newestDate, role, archived }: NotebookSummary): string {
  const count = entryCount === 1 ? '1 entry' : `${entryCount} entries`;
  const newest = newestDate ? `, the latest of ${formatDay(newestDate, 'short')}` : '';
  return `${count}${newest}. ${roleSentences[role]}${archived ? ' Archived.' : ''}`;
}

const roleSentences: Readonly<Record<NotebookSummary['role'], string>> = {
  owner: 'You own it.',
  editor: 'You write in it.',
  reader: 'You read it.',
  witness: 'You witness in it.',
};
