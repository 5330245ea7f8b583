'use client';

import type { ReactNode } from 'react';
import { classes } from '@/components/ui/classes';
import type { MeasurementRow, MeasurementSort } from '@/db/inputs/measurement';
import { IntervalAxis, type AskedRange } from './interval-plot';
import type { IntervalScale } from './interval-scale';
import { LedgerRow } from './ledger-row';

const headCell = 'label py-2 align-bottom font-normal text-muted';

/**
 * The ledger of measurements. Below 960 px each row folds into a few stacked lines and of the head only the axis stays;
 * the roles are written out, because browsers forget that a table is one when it is laid out otherwise.
 */
export function Ledger({
  rows,
  scale,
  asked,
  sort,
  onSort,
  isWaiting,
}: {
  rows: readonly MeasurementRow[];
  scale: IntervalScale | null;
  asked: AskedRange;
  sort: MeasurementSort;
  onSort: (sort: MeasurementSort) => void;
  /** Another question is being answered; these rows belong to the last one. */
  isWaiting: boolean;
}) {
  return (
    <table
      role="table"
      aria-label="Measurements"
      aria-busy={isWaiting || undefined}
      className={classes(
        'block w-full border-b transition-opacity min-[960px]:table min-[960px]:table-fixed',
        isWaiting && 'opacity-50 delay-200',
      )}
    >
      <thead role="rowgroup" className="block min-[960px]:table-header-group">
        <tr role="row" className="block border-b min-[960px]:table-row">
          <Head className="w-19 pr-4 text-left max-[959px]:sr-only">Number</Head>
          <Head className="pr-4 text-left max-[959px]:sr-only">Title and people</Head>
          <SortHead
            className="w-[6.75rem] pr-4 text-left max-[959px]:sr-only"
            sort={sort}
            up="date-asc"
            down="date-desc"
            first="date-desc"
            onSort={onSort}
          >
            Date
          </SortHead>
          <SortHead
            className="w-[12.25rem] pr-4 text-left max-[959px]:sr-only"
            sort={sort}
            up="d-asc"
            down="d-desc"
            first="d-asc"
            onSort={onSort}
          >
            <i className="font-serif">D</i> and verdict
          </SortHead>
          <th
            role="columnheader"
            scope="col"
            className="relative block h-12 font-normal min-[960px]:table-cell min-[960px]:w-44"
          >
            <span className="sr-only">95 % interval on a log axis, in µm²/s</span>
            {scale ? <IntervalAxis scale={scale} /> : null}
          </th>
          <Head className="w-16 text-right max-[959px]:sr-only">Tracks</Head>
        </tr>
      </thead>
      <tbody role="rowgroup" className="block min-[960px]:table-row-group">
        {rows.map((row) => (
          <LedgerRow key={`${row.entryId} ${row.blockId}`} row={row} scale={scale} asked={asked} />
        ))}
      </tbody>
    </table>
  );
}

function Head({ className, children }: { className: string; children: ReactNode }) {
  return (
    <th role="columnheader" scope="col" className={classes(headCell, className)}>
      {children}
    </th>
  );
}

/** A column that one can sort by: pressing it again turns the order round. */
function SortHead({
  sort,
  up,
  down,
  first,
  onSort,
  className,
  children,
}: {
  sort: MeasurementSort;
  up: MeasurementSort;
  down: MeasurementSort;
  first: MeasurementSort;
  onSort: (sort: MeasurementSort) => void;
  className: string;
  children: ReactNode;
}) {
  const state = sort === up ? 'ascending' : sort === down ? 'descending' : 'none';
  const other = sort === up ? down : up;
  return (
    <th role="columnheader" scope="col" aria-sort={state} className={classes(headCell, className)}>
      <button
        type="button"
        className={classes(
          '-my-1 inline-flex min-h-7 items-center gap-1.5 underline-offset-4 hover:text-ink hover:underline',
          state !== 'none' && 'font-semibold text-ink',
        )}
        onClick={() => onSort(state === 'none' ? first : other)}
      >
        {children}
        <svg
          aria-hidden
          viewBox="0 0 8 10"
          className={classes(
            'h-2.5 w-2 fill-none stroke-current stroke-[1.4]',
            state === 'none' && 'opacity-0',
          )}
        >
          <path d={state === 'descending' ? 'M4 1V9M1 6L4 9L7 6' : 'M4 9V1M1 4L4 1L7 4'} />
        </svg>
      </button>
    </th>
  );
}
