'use client';

import { useEffect, useRef, useState } from 'react';

/** Typing is written after this pause, so that little is lost when a page closes and others can follow. */
const PAUSE_MS = 600;

/** The caption of a block, plain text like a figure's. What others write appears unless this person is typing here. */
export function Caption({
  value,
  editable,
  onChange,
}: {
  value: string;
  editable: boolean;
  onChange: (caption: string) => void;
}) {
  const [draft, setDraft] = useState<string | null>(null);
  const timer = useRef<ReturnType<typeof setTimeout> | null>(null);
  const latest = useRef(onChange);
  useEffect(() => {
    latest.current = onChange;
  }, [onChange]);
  useEffect(
    () => () => {
      if (timer.current) clearTimeout(timer.current);
    },
    [],
  );
  const write = (caption: string) => {
    if (timer.current) clearTimeout(timer.current);
    timer.current = null;
    if (caption !== value) latest.current(caption);
  };
  const printed = value ? <span className="italic">{value}</span> : null;
  if (!editable) return printed;
  return (
    <>
      <span className="hidden print:inline">{printed}</span>
      <textarea
        aria-label="Caption"
        rows={1}
        maxLength={500}
        placeholder="Say what was measured"
        className="field-sizing-content block w-full min-w-0 resize-none bg-transparent italic focus:outline-none focus-visible:underline focus-visible:decoration-malachite focus-visible:decoration-1 focus-visible:underline-offset-4 print:hidden"
        value={draft ?? value}
        onChange={({ target }) => {
          // A caption is one paragraph; a pasted line break becomes a space.
          const typed = target.value.replace(/\s*\n\s*/g, ' ');
          setDraft(typed);
          if (timer.current) clearTimeout(timer.current);
          timer.current = setTimeout(() => write(typed), PAUSE_MS);
        }}
        onBlur={() => {
          if (draft !== null) write(draft);
          setDraft(null);
        }}
        onKeyDown={(event) => {
          if (event.key !== 'Enter') return;
          event.preventDefault();
          event.currentTarget.blur();
        }}
      />
    </>
  );
}
