'use client';

import { useRef, useState } from 'react';
import { formatDay } from '@/components/ui/format-date';
import { useSavedValue, type SaveOutcome } from './use-saved-value';

/** The day of the experiment in words; pressed, it becomes a date field. Escape leaves it as it was. */
export function EntryDate({
  day,
  editable,
  save,
}: {
  /** Year-month-day. */
  day: string;
  editable: boolean;
  save: (day: string) => Promise<SaveOutcome>;
}) {
  const { value, setValue, state, commit } = useSavedValue(day, save);
  const [editing, setEditing] = useState(false);
  const [draft, setDraft] = useState(day);
  const button = useRef<HTMLButtonElement>(null);

  if (!editable) return <time dateTime={day}>{formatDay(day)}</time>;

  function leave(keep: boolean): void {
    setEditing(false);
    if (keep && draft !== '' && draft !== value) {
      setValue(draft);
      void commit(draft);
    }
    requestAnimationFrame(() => button.current?.focus());
  }

  return (
    <>
      {editing ? (
        <input
          type="date"
          aria-label="Experiment date"
          // The button that was pressed is gone; the field takes its place for the keyboard too.
          autoFocus
          min="1900-01-01"
          max="2199-12-31"
          value={draft}
          onChange={(event) => setDraft(event.target.value)}
          onBlur={() => leave(true)}
          onKeyDown={(event) => {
            if (event.key === 'Enter') leave(true);
            if (event.key === 'Escape') leave(false);
          }}
          className="-my-1 min-h-7 rounded-sm border border-control bg-page px-1 max-desk:min-h-11"
        />
      ) : (
        <button
          ref={button}
          type="button"
          aria-label={`Experiment date ${formatDay(value)}, change it`}
          onClick={() => {
            setDraft(value);
            setEditing(true);
          }}
          className="underline decoration-rule decoration-1 underline-offset-4 hover:decoration-ink max-desk:min-h-11"
        >
          <time dateTime={value}>{formatDay(value)}</time>
        </button>
      )}
      <span role="status" className={state.is === 'failed' ? 'text-madder' : 'sr-only'}>
        {state.is === 'failed' ? (
          <>
            {' '}
            The date is not saved. {state.sentence}{' '}
            <button type="button" className="link" onClick={() => void commit(value)}>
              Try again
            </button>
          </>
        ) : null}
      </span>
    </>
  );
}
