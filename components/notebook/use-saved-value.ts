'use client';

import { useCallback, useEffect, useRef, useState } from 'react';
import type { Refusal } from '@/db/errors';

export type SaveOutcome = { ok: true; value: unknown } | { ok: false; refusal: Refusal };

export type SaveState =
  | { readonly is: 'saved' }
  | { readonly is: 'saving' }
  /** What was typed is kept; `sentence` says what happened and what to do. */
  | { readonly is: 'failed'; readonly sentence: string };

/**
 * A single value that is edited in place and saved by an action. Saves go one after the other, the newest value last, so
 * that answers which overtake each other cannot bring an old value back. A value that arrives from elsewhere (somebody
 * else's change) is taken over unless something of one's own is still unsaved.
 */
export function useSavedValue(stored: string, save: (value: string) => Promise<SaveOutcome>) {
  const [value, setValue] = useState(stored);
  /** What is stored, as far as this page knows: adopted from elsewhere or saved from here. */
  const [base, setBase] = useState(stored);
  const [known, setKnown] = useState(stored);
  const [state, setState] = useState<SaveState>({ is: 'saved' });
  const wanted = useRef(stored);
  const kept = useRef(stored);
  const running = useRef(false);

  if (stored !== known) {
    setKnown(stored);
    setBase(stored);
    if (state.is === 'saved' && value === base) setValue(stored);
  }
  useEffect(() => {
    // What is stored now is the measure of whether something needs saving.
    kept.current = known;
    if (!running.current) wanted.current = known;
  }, [known]);

  const commit = useCallback(
    async (next: string) => {
      wanted.current = next;
      if (running.current) return;
      running.current = true;
      try {
        while (wanted.current !== kept.current) {
          const sent = wanted.current;
          setState({ is: 'saving' });
          const fault = await trySave(save, sent);
          if (fault !== null) return setState({ is: 'failed', sentence: fault });
          kept.current = sent;
          setBase(sent);
        }
        setState({ is: 'saved' });
      } finally {
        running.current = false;
      }
    },
    [save],
  );

  return { value, setValue, state, commit };
}

/** @returns a sentence when it was not saved, else null. */
async function trySave(save: (value: string) => Promise<SaveOutcome>, value: string): Promise<string | null> {
  try {
    const outcome = await save(value);
    if (outcome.ok) return null;
    return Object.values(outcome.refusal.fields)[0] ?? outcome.refusal.sentence;
  } catch (error) {
    console.warn('a value could not be saved', error);
    return 'The server cannot be reached.';
  }
}
