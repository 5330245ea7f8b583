'use client';

import { useId, useState, type ReactNode } from 'react';
import { z } from 'zod';
import { Button } from '@/components/ui/button';
import { classes } from '@/components/ui/classes';
import {
  boundOfD,
  DATES_REVERSED,
  dayOfExperiment,
  NO_FILTERS,
  RANGE_REVERSED,
  type MeasurementFilters,
} from '@/db/inputs/measurement';
import { NotebooksChoice, RangeModeChoice, VerdictChoice, type NotebookChoice } from './choices';
import { countRestrictions, type UrlFaults } from './filters-in-url';
import { SpanFields, type SpanKind } from './span-fields';
import type { FilterChange } from './use-filters';

/** "0,43" is read as it is meant, as in a block's settings; "1,234" could be two numbers and stays refused. */
const typedBound = z
  .string()
  .transform((text) =>
    /^\s*([1-9]\d{0,2}),\d{3}\s*$/.test(text) ? text : text.replace(/^(\s*\d*),(\d+)/, '$1.$2'),
  )
  .pipe(boundOfD);

const ofD: SpanKind<number> = {
  type: 'text',
  shape: typedBound,
  write: String,
  reversed: RANGE_REVERSED,
  incomplete: 'Enter a number.',
};
const ofDays: SpanKind<string> = {
  type: 'date',
  shape: dayOfExperiment,
  write: (day) => day,
  reversed: DATES_REVERSED,
  incomplete: 'Enter the whole date, or clear it.',
};

/** What is asked for. Each part answers at once; on a phone all but the range of D waits behind one button. */
export function FilterForm({
  filters,
  faults,
  notebooks,
  onChange,
  onLeave,
}: {
  filters: MeasurementFilters;
  faults: UrlFaults;
  notebooks: readonly NotebookChoice[];
  onChange: (change: FilterChange, typing?: string) => void;
  onLeave: () => void;
}) {
  const [isOpen, setOpen] = useState(false);
  /** Counts how often everything was cleared: fields made anew also lose what was typed but could not be read. */
  const [cleared, setCleared] = useState(0);
  const restrictions = countRestrictions(filters);
  const hasRange = filters.dFrom !== null || filters.dTo !== null;
  const hidden = restrictions - (hasRange ? 1 : 0);
  const folds = isOpen ? '' : 'max-tab:hidden';
  return (
    <form
      role="search"
      aria-label="Measurements"
      className="space-y-1 border-y py-4 max-tab:space-y-2"
      onSubmit={(event) => event.preventDefault()}
    >
      <Part title={<i className="font-serif">D</i>}>
        <div className="flex flex-wrap items-start gap-x-8">
          <SpanFields
            key={cleared}
            name="D in square micrometres per second"
            kind={ofD}
            value={{ from: filters.dFrom, to: filters.dTo }}
            faults={{ ...(faults.dFrom && { from: faults.dFrom }), ...(faults.dTo && { to: faults.dTo }) }}
            unit="µm²/s"
            onChange={({ from, to }) => onChange({ dFrom: from, dTo: to }, 'range')}
            onLeave={onLeave}
          />
          <RangeModeChoice mode={filters.range} onChange={(range) => onChange({ range })} />
        </div>
      </Part>
      <Part title="Verdict" className={folds}>
        <VerdictChoice chosen={filters.verdict} onChange={(verdict) => onChange({ verdict })} />
      </Part>
      {notebooks.length > 1 || filters.notebook.length > 0 ? (
        <Part title="Notebook" className={folds}>
          <NotebooksChoice
            notebooks={notebooks}
            chosen={filters.notebook}
            onChange={(notebook) => onChange({ notebook })}
          />
        </Part>
      ) : null}
      <Part title="Experiment date" className={folds}>
        <SpanFields
          key={cleared}
          name="experiment date"
          kind={ofDays}
          value={{ from: filters.dateFrom, to: filters.dateTo }}
          faults={{
            ...(faults.dateFrom && { from: faults.dateFrom }),
            ...(faults.dateTo && { to: faults.dateTo }),
          }}
          onChange={({ from, to }) => onChange({ dateFrom: from, dateTo: to }, 'days')}
          onLeave={onLeave}
        />
      </Part>
      <div className="flex flex-wrap gap-3 empty:hidden max-tab:pt-2 tab:pl-32">
        <Button
          size="small"
          className="tab:hidden"
          aria-expanded={isOpen}
          onClick={() => setOpen((open) => !open)}
        >
          {isOpen ? 'Show fewer filters' : `Show more filters${hidden > 0 ? ` (${hidden} in use)` : ''}`}
        </Button>
        {restrictions > 0 || Object.keys(faults).length > 0 ? (
          <Button
            size="small"
            weight="quiet"
            className="tab:-ml-2"
            onClick={() => {
              setCleared((times) => times + 1);
              onChange({ ...NO_FILTERS, sort: filters.sort });
            }}
          >
            Clear all filters
          </Button>
        ) : null}
      </div>
    </form>
  );
}

/** A named part of the question: its name at the left, or above on a phone. */
function Part({ title, className, children }: { title: ReactNode; className?: string; children: ReactNode }) {
  const id = useId();
  return (
    <div role="group" aria-labelledby={id} className={classes('tab:flex', className)}>
      <p
        id={id}
        className="small flex w-32 shrink-0 items-center self-start pr-4 text-muted max-tab:mb-1 tab:min-h-10 tab:max-desk:min-h-11 tab:pointer-coarse:min-h-11"
      >
        {title}
      </p>
      <div className="min-w-0 grow">{children}</div>
    </div>
  );
}
