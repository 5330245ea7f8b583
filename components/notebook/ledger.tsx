import Link from 'next/link';
import type { Verdict } from '@/analysis/types';
import { formatDay } from '@/components/ui/format-date';
import { Quantity } from '@/components/ui/quantity';
import { VerdictMark } from '@/components/ui/verdict-glyph';
import { EntryNumber } from './entry-number';
import { stateWords, type EntryState } from './state-words';

export interface LedgerLine {
  readonly id: string;
  readonly notebookCode: string;
  readonly number: number;
  readonly title: string;
  readonly experimentDate: string;
  readonly state: EntryState;
  readonly people: readonly string[];
  readonly results: readonly LedgerLineResult[];
  /** How many results the entry has; more than are shown here, perhaps. */
  readonly resultCount: number;
}

interface LedgerLineResult {
  readonly blockId: string;
  readonly verdict: Verdict;
  readonly d: number | null;
  readonly lo: number | null;
  readonly hi: number | null;
}

const head = 'label py-2 pr-4 text-left font-normal text-muted';
const cell = 'tab:py-3 tab:pr-4 tab:align-baseline';

/**
 * A ruled ledger of entries: number, title, people, date, state, D. On a phone each entry is a short paragraph instead. The
 * roles are written out, because browsers forget that a table is one when it is laid out otherwise.
 */
export function Ledger({ lines, label }: { lines: readonly LedgerLine[]; label: string }) {
  return (
    <table role="table" aria-label={label} className="block w-full border-b tab:table tab:table-fixed">
      <thead role="rowgroup" className="hidden tab:table-header-group">
        <tr role="row" className="border-b">
          <th role="columnheader" scope="col" className={`${head} w-20`}>
            Number
          </th>
          <th role="columnheader" scope="col" className={head}>
            Title
          </th>
          <th role="columnheader" scope="col" className={`${head} w-28 pr-2`}>
            Date
          </th>
          <th role="columnheader" scope="col" className={`${head} w-16`}>
            State
          </th>
          <th role="columnheader" scope="col" className={`${head} w-[19.5rem] pr-0`}>
            <i className="font-serif">D</i> and verdict
          </th>
        </tr>
      </thead>
      <tbody role="rowgroup" className="block border-t tab:table-row-group tab:border-t-0">
        {lines.map((line) => (
          <LedgerRow key={line.id} line={line} />
        ))}
      </tbody>
    </table>
  );
}

function LedgerRow({ line }: { line: LedgerLine }) {
  return (
    <tr
      role="row"
      className="group relative grid grid-cols-[auto_auto_1fr] gap-x-3 border-b py-3 last:border-b-0 hover:bg-page tab:table-row tab:py-0"
    >
      <td role="cell" className={`label whitespace-nowrap text-muted ${cell}`}>
        <EntryNumber code={line.notebookCode} number={line.number} />
      </td>
      <td role="cell" className={`max-tab:order-1 max-tab:col-span-3 max-tab:mt-0.5 ${cell}`}>
        <Link
          href={`/entries/${line.id}`}
          className="leading-snug text-ink decoration-1 underline-offset-4 group-hover:underline after:absolute after:inset-0"
        >
          {line.title || <span className="text-muted">No title yet</span>}
        </Link>
        <span className="label mt-0.5 block text-muted">{line.people.join(', ')}</span>
      </td>
      <td role="cell" className={`label whitespace-nowrap max-tab:text-muted ${cell}`}>
        <time dateTime={line.experimentDate}>{formatDay(line.experimentDate, 'short')}</time>
      </td>
      <td role="cell" className={`label text-muted ${cell}`}>
        {stateWords[line.state]}
      </td>
      <td role="cell" className={`label max-tab:order-2 max-tab:col-span-3 max-tab:mt-1 ${cell} tab:pr-0`}>
        <Results line={line} />
      </td>
    </tr>
  );
}

function Results({ line }: { line: LedgerLine }) {
  const hidden = line.resultCount - line.results.length;
  return (
    <ul className="space-y-0.5">
      {line.results.map(({ blockId, verdict, d, lo, hi }) => (
        <li key={blockId} className="flex items-baseline gap-x-3 max-tab:flex-wrap">
          <span className="tab:w-48 tab:shrink-0">
            {d === null ? (
              <span className="text-muted">no single value</span>
            ) : (
              <Quantity value={d} lo={lo} hi={hi} unit="µm²/s" />
            )}
          </span>
          <VerdictMark verdict={verdict} />
        </li>
      ))}
      {hidden > 0 ? <li className="text-muted">and {hidden} more</li> : null}
    </ul>
  );
}
