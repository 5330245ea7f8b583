'use client';

import { useEffect, useRef } from 'react';
import { TITLE_LENGTH_MAX } from '@/db/inputs/entry';
import { useSavedValue, type SaveOutcome } from './use-saved-value';

const PAUSE_MS = 700;

/**
 * The title, edited where it stands. It is saved when one pauses, leaves it or presses Enter. On a page that one may only
 * read it is plain text.
 */
export function EntryTitle({
  title,
  editable,
  save,
}: {
  title: string;
  editable: boolean;
  save: (title: string) => Promise<SaveOutcome>;
}) {
  const { value, setValue, state, commit } = useSavedValue(title, save);
  const pause = useRef<ReturnType<typeof setTimeout>>(undefined);
  const box = useRef<HTMLTextAreaElement>(null);

  useEffect(() => () => clearTimeout(pause.current), []);
  useEffect(() => {
    // As tall as its text, in browsers that do not do so by themselves (field-sizing).
    const element = box.current;
    if (!element || CSS.supports('field-sizing', 'content')) return;
    element.style.height = 'auto';
    element.style.height = `${element.scrollHeight}px`;
  }, [value]);

  if (!editable) {
    return <h1 className="text-title">{title || <span className="text-muted">No title yet</span>}</h1>;
  }

  function keep(next: string): void {
    clearTimeout(pause.current);
    void commit(tidy(next));
  }

  return (
    <div>
      <h1 className="sr-only">{value || 'No title yet'}</h1>
      <textarea
        ref={box}
        rows={1}
        aria-label="Title"
        aria-describedby="title-state"
        placeholder="Give this day a title"
        maxLength={TITLE_LENGTH_MAX}
        value={value}
        onChange={(event) => {
          const next = event.target.value.replace(/[\r\n]+/g, ' ');
          setValue(next);
          clearTimeout(pause.current);
          pause.current = setTimeout(() => keep(next), PAUSE_MS);
        }}
        onBlur={() => keep(value)}
        onKeyDown={(event) => {
          if (event.key !== 'Enter' || event.nativeEvent.isComposing) return;
          event.preventDefault();
          keep(value);
        }}
        className="-mx-2 block min-h-11 w-[calc(100%+1rem)] resize-none overflow-hidden rounded-sm bg-transparent px-2 py-0.5 text-title font-bold field-sizing-content hover:bg-paper focus:bg-paper focus-visible:outline-offset-0"
      />
      <p id="title-state" role="status" className={state.is === 'failed' ? 'label text-madder' : 'sr-only'}>
        {state.is === 'saving' ? 'The title is being saved.' : null}
        {state.is === 'failed' ? (
          <>
            The title is not saved. {state.sentence}{' '}
            <button type="button" className="link" onClick={() => keep(value)}>
              Try again
            </button>
          </>
        ) : null}
      </p>
    </div>
  );
}

/** What the server will make of it, so that a space at the end is no change. */
const tidy = (text: string): string => text.replace(/ {2,}/g, ' ').trim();
