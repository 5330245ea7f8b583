'use client';

import { useRef, useState, useTransition } from 'react';
import type { Refusal } from '@/db/errors';

export type Outcome<T> = { ok: true; value: T } | { ok: false; refusal: Refusal };
export type Act<Input, T = unknown> = (input: Input) => Promise<Outcome<T>>;

const AWAY = 'The server cannot be reached. What you typed is still here; check the network and try again.';

/**
 * Runs an action for a form: what is wrong is kept by field, what concerns the whole form apart, and the first wrong field
 * is given the focus. What was typed belongs to the form and stays.
 */
export function useAct() {
  const [fields, setFields] = useState<Readonly<Record<string, string>>>({});
  const [fault, setFault] = useState<string | null>(null);
  const [busy, startTransition] = useTransition();
  const form = useRef<HTMLFormElement>(null);

  function run<Input, T>(act: Act<Input, T>, input: Input, onDone: (value: T) => void): void {
    startTransition(async () => {
      try {
        const outcome = await act(input);
        setFields(outcome.ok ? {} : outcome.refusal.fields);
        const wrongFields = outcome.ok ? 0 : Object.keys(outcome.refusal.fields).length;
        setFault(outcome.ok || wrongFields > 0 ? null : outcome.refusal.sentence);
        if (outcome.ok) return onDone(outcome.value);
        requestAnimationFrame(() => form.current?.querySelector<HTMLElement>('[aria-invalid]')?.focus());
      } catch (error) {
        console.warn('an action could not be sent', error);
        setFault(AWAY);
      }
    });
  }

  return { run, busy, fields, fault, form };
}
