import Link from 'next/link';
import { EntryNumber } from '@/components/notebook/entry-number';
import { stateWords } from '@/components/notebook/state-words';
import { formatDay } from '@/components/ui/format-date';
import { Quantity } from '@/components/ui/quantity';
import { VerdictMark } from '@/components/ui/verdict-glyph';
import type { FoundEntry } from '@/db/queries/search/search-entries';
import { Pieces } from './pieces';

/** What was found: number and title, where the words stand, who and when, and what was measured there. */
export function FoundList({ entries }: { entries: readonly FoundEntry[] }) {
  return (
    <ul className="border-t">
      {entries.map((entry) => (
        <li key={entry.id} className="group relative border-b py-4 hover:bg-page">
          <p className="label text-muted">
            <EntryNumber code={entry.notebookCode} number={entry.number} /> ·{' '}
            {formatDay(entry.experimentDate)} · {stateWords[entry.state]}
          </p>
          <h2 className="text-lead">
            <Link
              href={`/entries/${entry.id}`}
              className="font-normal decoration-1 underline-offset-4 group-hover:underline after:absolute after:inset-0"
            >
              {entry.title === '' ? (
                <span className="text-muted">Untitled</span>
              ) : (
                <Pieces pieces={entry.titlePieces} />
              )}
            </Link>
          </h2>
          {entry.passages.map((passage, at) => (
            <p key={at} className="small mt-1 max-w-measure text-muted">
              … <Pieces pieces={passage} /> …
            </p>
          ))}
          <p className="label mt-1 flex flex-wrap items-baseline gap-x-4 text-muted">
            <span>{entry.people.join(', ')}</span>
            {entry.results.slice(0, 2).map((one) => (
              <span key={one.blockId} className="inline-flex items-baseline gap-2">
                {one.d === null ? null : (
                  <Quantity symbol="D" value={one.d} lo={one.lo} hi={one.hi} unit="µm²/s" />
                )}
                <VerdictMark verdict={one.verdict} alpha={null} size={14} />
              </span>
            ))}
          </p>
        </li>
      ))}
    </ul>
  );
}
