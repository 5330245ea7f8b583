'use client';

import { useState } from 'react';
import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import type { BlockAttributes } from '@/db/inputs/block-settings';
import { conflictOf, parseNumber, type NumberSetting } from './parse-number';

/** What stands in a field while somebody works in it; null otherwise. `from` is the shared value it began with. */
interface Draft {
  readonly text: string;
  readonly from: number | null;
  readonly error: string | null;
}

/**
 * One number of a shared setting. It is written when the field is left or Enter is pressed, and only when it is right; what
 * is wrong stays in the field with a sentence under it. What others write appears, unless this person is typing here.
 */
export function NumberField({
  setting,
  label,
  unit,
  hint,
  block,
  disabled,
  onChange,
}: {
  setting: NumberSetting;
  label: string;
  unit?: string;
  hint?: string;
  block: BlockAttributes;
  disabled: boolean;
  /** null: not stated any more. */
  onChange: (value: number | null) => void;
}) {
  const value = block[setting];
  const [draft, setDraft] = useState<Draft | null>(null);
  const changedMeanwhile = draft !== null && draft.error === null && draft.from !== value;
  const commit = () => {
    if (draft === null) return;
    const parsed = parseNumber(draft.text, setting);
    const error = 'error' in parsed ? parsed.error : conflictOf(block, setting, parsed.value);
    if (error !== null || 'error' in parsed) return setDraft({ ...draft, error });
    setDraft(null);
    if (parsed.value !== value) onChange(parsed.value);
  };
  return (
    <Field
      label={label}
      unit={unit}
      hint={
        changedMeanwhile
          ? `Changed to ${words(value, unit)} meanwhile; leaving the field writes yours.`
          : hint
      }
      error={draft?.error ?? undefined}
    >
      {(control) => (
        <Input
          {...control}
          inputMode="decimal"
          autoComplete="off"
          disabled={disabled}
          value={draft?.text ?? (value === null ? '' : String(value))}
          onChange={({ target }) =>
            setDraft({ text: target.value, from: draft ? draft.from : value, error: null })
          }
          onBlur={commit}
          onKeyDown={(event) => {
            if (event.key === 'Enter') commit();
            if (event.key === 'Escape') setDraft(null);
          }}
        />
      )}
    </Field>
  );
}

function words(value: number | null, unit: string | undefined): string {
  if (value === null) return '“not stated”';
  return unit ? `${value} ${unit}` : String(value);
}
