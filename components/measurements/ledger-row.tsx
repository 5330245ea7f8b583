import Link from 'next/link';
import { EntryNumber } from '@/components/notebook/entry-number';
import { stateWords } from '@/components/notebook/state-words';
import { formatDay } from '@/components/ui/format-date';
import { Quantity } from '@/components/ui/quantity';
import { VerdictMark } from '@/components/ui/verdict-glyph';
import type { MeasurementRow } from '@/db/inputs/measurement';
import { IntervalPlot, type AskedRange } from './interval-plot';
import type { IntervalScale } from './interval-scale';
import { someOf } from './words';

const bare = 'label min-[960px]:py-3 min-[960px]:align-baseline';
const cell = `${bare} min-[960px]:pr-4`;

/** One measurement; the whole row leads to its block in the entry. */
export function LedgerRow({
  row,
  scale,
  asked,
}: {
  row: MeasurementRow;
  scale: IntervalScale | null;
  asked: AskedRange;
}) {
  return (
    <tr
      role="row"
      className="group relative grid grid-cols-[1fr_auto] gap-x-4 border-b py-3 last:border-b-0 hover:bg-page focus-within:bg-page min-[960px]:table-row min-[960px]:py-0"
    >
      <td role="cell" className={`${cell} whitespace-nowrap text-muted`}>
        <EntryNumber code={row.notebookCode} number={row.number} />
        <span className="min-[960px]:block">
          <span className="min-[960px]:hidden">, </span>block {row.position}
        </span>
      </td>
      <td role="cell" className={`${cell} max-[959px]:order-1 max-[959px]:col-span-2 max-[959px]:mt-0.5`}>
        <Link
          href={`/entries/${row.entryId}#block-${row.blockId}`}
          className="font-serif text-[1rem] leading-snug text-ink decoration-1 underline-offset-4 group-hover:underline after:absolute after:inset-0"
        >
          {row.title || <span className="text-muted">No title yet</span>}
          <span className="sr-only">, block {row.position}</span>
        </Link>
        {row.caption ? <span className="mt-0.5 line-clamp-2 text-ink">{row.caption}</span> : null}
        <span className="mt-0.5 block text-muted">{row.people.join(', ')}</span>
      </td>
      <td role="cell" className={`${cell} whitespace-nowrap max-[959px]:text-right max-[959px]:text-muted`}>
        <time dateTime={row.experimentDate}>{formatDay(row.experimentDate, 'short')}</time>
        <span className="text-muted min-[960px]:block">
          <span className="min-[960px]:hidden">, </span>
          {stateWords[row.state]}
        </span>
      </td>
      <td role="cell" className={`${cell} max-[959px]:order-2 max-[959px]:mt-1.5`}>
        <span className="max-[959px]:mr-4">
          {row.d ? (
            <Quantity value={row.d.value} lo={row.d.lo} hi={row.d.hi} unit="µm²/s" />
          ) : (
            <span className="text-muted">
              {row.verdict === 'anomalous' ? (
                <>
                  no single <i className="font-serif">D</i>
                </>
              ) : (
                'no motion resolved'
              )}
            </span>
          )}
        </span>
        <span className="inline-block min-[960px]:block">
          <VerdictMark verdict={row.verdict} />
        </span>
      </td>
      <td
        role="cell"
        className="pointer-events-none relative max-[959px]:order-4 max-[959px]:col-span-2 max-[959px]:h-8"
      >
        {scale ? <IntervalPlot row={row} scale={scale} asked={asked} /> : null}
      </td>
      <td
        role="cell"
        className={`${bare} whitespace-nowrap text-right max-[959px]:order-3 max-[959px]:mt-1.5 max-[959px]:text-muted`}
      >
        {row.tracks === null ? (
          <span className="text-muted">not stated</span>
        ) : (
          <>
            <span className="min-[960px]:hidden">{someOf(row.tracks, 'track')}</span>
            <span className="max-[959px]:hidden">{row.tracks.toLocaleString('en')}</span>
          </>
        )}
      </td>
    </tr>
  );
}
