'use client';

import { Button } from '@/components/ui/button';
import { Select } from '@/components/ui/select';
import { MEASUREMENT_SORTS, type MeasurementFilters, type MeasurementSort } from '@/db/inputs/measurement';
import type { NotebookChoice } from './choices';
import { FilterForm } from './filter-form';
import { countRestrictions } from './filters-in-url';
import { intervalScale } from './interval-scale';
import { Ledger } from './ledger';
import { Failed, LoadingRows, NoMatch, NothingYet } from './list-states';
import { Remarks, SummaryLine } from './summary';
import { useFilters, type FilterChange } from './use-filters';
import { useMeasurements, type MeasurementList } from './use-measurements';

/** Every D that one may read: the question, the answer, and what is to be said about it. */
export function Measurements({
  notebooks,
  mayWrite,
}: {
  notebooks: readonly NotebookChoice[];
  mayWrite: boolean;
}) {
  const { filters, faults, change, endTyping } = useFilters();
  const list = useMeasurements(filters);
  return (
    <>
      <FilterForm
        filters={filters}
        faults={faults}
        notebooks={notebooks}
        onChange={change}
        onLeave={endTyping}
      />
      <Answer
        list={list}
        filters={filters}
        onChange={change}
        mayWrite={mayWrite}
        belongs={notebooks.length > 0}
      />
    </>
  );
}

function Answer({
  list,
  filters,
  onChange,
  mayWrite,
  belongs,
}: {
  list: MeasurementList;
  filters: MeasurementFilters;
  onChange: (change: FilterChange) => void;
  mayWrite: boolean;
  /** Whether there is any notebook that one may read. */
  belongs: boolean;
}) {
  const { data, error } = list;
  const isRetrying = list.isFetching && !list.isFetchingNextPage;
  const failed = error ? (
    <Failed error={error} isBusy={isRetrying} onRetry={() => void list.refetch()} />
  ) : null;
  if (!data) {
    return (
      <section aria-label="Answer" className="mt-6">
        {failed ?? <LoadingRows />}
      </section>
    );
  }
  const rows = data.pages.flatMap((page) => page.rows);
  const summary = data.pages[0]?.summary ?? null;
  const isEmpty = rows.length === 0;
  const asked = { from: filters.dFrom, to: filters.dTo };
  // The axis holds the counted matches and the range, so that it stands still while more rows come in.
  const scale = intervalScale([
    ...[summary?.extent?.lo ?? null, summary?.extent?.hi ?? null, filters.dFrom, filters.dTo],
    ...rows.flatMap(({ d }) => (d ? [d.value, d.lo, d.hi] : [])),
  ]);
  return (
    // An empty place has rules of its own: its first one falls on the last one of the form.
    <section aria-label="Answer" className={isEmpty && !failed ? '-mt-px' : 'mt-6'}>
      <div className={isEmpty ? 'sr-only' : 'flex flex-wrap items-end justify-between gap-x-4 gap-y-2 pb-2'}>
        <SummaryLine summary={summary} isWaiting={list.isPlaceholderData} />
        {isEmpty ? null : <SortChoice sort={filters.sort} onSort={(sort) => onChange({ sort })} />}
      </div>
      {failed}
      {!isEmpty ? (
        <Ledger
          rows={rows}
          scale={scale}
          asked={asked}
          sort={filters.sort}
          onSort={(sort) => onChange({ sort })}
          isWaiting={list.isPlaceholderData}
        />
      ) : countRestrictions(filters) > 0 && summary ? (
        <NoMatch summary={summary} isOverlap={filters.range === 'overlaps'} onChange={onChange} />
      ) : (
        <NothingYet mayWrite={mayWrite} belongs={belongs} />
      )}
      {list.hasNextPage && !list.isPlaceholderData ? (
        <Button className="mt-5" busy={list.isFetchingNextPage} onClick={() => void list.fetchNextPage()}>
          {list.isFetchingNextPage ? 'Fetching more …' : 'Show more'}
        </Button>
      ) : null}
      <Remarks summary={summary} rows={rows} sort={filters.sort} onChange={onChange} />
    </section>
  );
}

const sortWords: Readonly<Record<MeasurementSort, string>> = {
  'date-desc': 'newest first',
  'date-asc': 'oldest first',
  'd-asc': 'smallest D first',
  'd-desc': 'largest D first',
};

/** Where the ledger has no head to press. */
function SortChoice({ sort, onSort }: { sort: MeasurementSort; onSort: (sort: MeasurementSort) => void }) {
  return (
    <label className="label flex items-center gap-2 text-muted min-[960px]:hidden">
      Order
      <Select
        value={sort}
        onChange={({ target }) => {
          const chosen = MEASUREMENT_SORTS.find((one) => one === target.value);
          if (chosen) onSort(chosen);
        }}
      >
        {MEASUREMENT_SORTS.map((one) => (
          <option key={one} value={one}>
            {sortWords[one]}
          </option>
        ))}
      </Select>
    </label>
  );
}
