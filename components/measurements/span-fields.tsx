'use client';

import { useEffect, useRef, useState, type ReactNode } from 'react';
import type { z } from 'zod';
import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import { isReversed, type UrlFault } from './filters-in-url';

/** How long a pause in typing must be before what was typed is read. */
const PAUSE_MS = 450;

const ENDS = ['from', 'to'] as const;
type End = (typeof ENDS)[number];
export interface Span<T> {
  readonly from: T | null;
  readonly to: T | null;
}

/** What the two fields have in common. `shape` reads a text; `write` shows a value as one would type it. */
export interface SpanKind<T> {
  readonly type: 'text' | 'date';
  readonly shape: z.ZodType<T, string>;
  readonly write: (value: T) => string;
  readonly reversed: string;
  /** Said of a field that the browser itself cannot read. */
  readonly incomplete: string;
}

/**
 * From … to …: two fields that are read together after a pause, on Enter, or when one is left. What cannot be read stays
 * as it was typed, with the reason under it, and changes nothing.
 */
export function SpanFields<T extends number | string>({
  name,
  kind,
  value,
  faults,
  unit,
  onChange,
  onLeave,
}: {
  /** What is asked for, for those who listen: "D in square micrometres per second". */
  name: string;
  kind: SpanKind<T>;
  value: Span<T>;
  /** What the address held instead of a value. */
  faults: Partial<Record<End, UrlFault>>;
  unit?: ReactNode;
  onChange: (span: Span<T>) => void;
  onLeave: () => void;
}) {
  const [fields, setFields] = useState(() => fieldsOf(value, faults, kind));
  const [seen, setSeen] = useState(value);
  if (seen.from !== value.from || seen.to !== value.to) {
    setSeen(value);
    // Changed from elsewhere (back button, "clear"): show it. What was typed here and means the same stays as typed.
    const meant = read(fields, kind);
    if (meant.span?.from !== value.from || meant.span.to !== value.to)
      setFields(fieldsOf(value, faults, kind));
  }

  const pause = useRef<ReturnType<typeof setTimeout> | undefined>(undefined);
  useEffect(() => () => clearTimeout(pause.current), []);
  const settle = (typed: Fields) => {
    clearTimeout(pause.current);
    const { span, errors } = read(typed, kind);
    setFields((now) => ({ from: { ...now.from, error: errors.from }, to: { ...now.to, error: errors.to } }));
    if (span && (span.from !== value.from || span.to !== value.to)) onChange(span);
  };
  const type = (end: End, text: string, unreadable: boolean) => {
    const typed = { ...fields, [end]: { ...fields[end], text, unreadable } };
    setFields(typed);
    clearTimeout(pause.current);
    pause.current = setTimeout(() => settle(typed), PAUSE_MS);
  };

  return (
    <div className="flex flex-wrap items-start gap-x-4 gap-y-2">
      {ENDS.map((end) => (
        <Field
          key={end}
          className={kind.type === 'date' ? 'w-40 max-tab:grow' : 'w-32 max-tab:grow'}
          label={
            <>
              {end}
              <span className="sr-only">, {name}</span>
            </>
          }
          error={fields[end].error}
        >
          {(control) => (
            <Input
              {...control}
              type={kind.type}
              {...(kind.type === 'text' ? { inputMode: 'decimal' as const, spellCheck: false } : {})}
              autoComplete="off"
              className="tabular-nums"
              value={fields[end].text}
              onChange={({ target }) => type(end, target.value, target.validity.badInput)}
              onBlur={() => {
                settle(fields);
                onLeave();
              }}
              onKeyDown={({ key }) => {
                if (key === 'Enter') settle(fields);
              }}
            />
          )}
        </Field>
      ))}
      {unit ? <span className="label pt-8 text-muted max-tab:pt-9">{unit}</span> : null}
    </div>
  );
}

interface FieldState {
  readonly text: string;
  readonly error: string | undefined;
  /** Half a date: the browser gives no text for it. */
  readonly unreadable: boolean;
}
type Fields = Readonly<Record<End, FieldState>>;

function fieldsOf<T>(value: Span<T>, faults: Partial<Record<End, UrlFault>>, kind: SpanKind<T>): Fields {
  const field = (end: End): FieldState => {
    const one = value[end];
    return {
      text: faults[end]?.text ?? (one === null ? '' : kind.write(one)),
      error: faults[end]?.message,
      unreadable: false,
    };
  };
  return { from: field('from'), to: field('to') };
}

/** Both fields as values, or what is wrong with them: then the span as a whole is not used. */
function read<T extends number | string>(
  fields: Fields,
  kind: SpanKind<T>,
): { span: Span<T> | null; errors: Partial<Record<End, string>> } {
  const errors: Partial<Record<End, string>> = {};
  const one = (end: End): T | null => {
    const { text, unreadable } = fields[end];
    if (unreadable) errors[end] = kind.incomplete;
    if (text.trim() === '') return null;
    const parsed = kind.shape.safeParse(text);
    if (parsed.success) return parsed.data;
    errors[end] = parsed.error.issues[0]?.message ?? kind.incomplete;
    return null;
  };
  const span = { from: one('from'), to: one('to') };
  if (isReversed(span.from, span.to)) errors.to = kind.reversed;
  return { span: Object.keys(errors).length === 0 ? span : null, errors };
}
