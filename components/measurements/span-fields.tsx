'use client';

import { useEffect, useId, useRef, useState, type ReactNode } from 'react';
import type { z } from 'zod';
import { classes } from '@/components/ui/classes';
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
  const moved = ENDS.filter((end) => seen[end] !== value[end]);
  if (moved.length > 0) {
    setSeen(value);
    // Changed from elsewhere (back button, "clear"): show it. What was typed here and means the same stays as typed, and
    // so does the other end, where somebody may be typing at this moment.
    const stale = moved.filter((end) => readOne(fields[end], kind).value !== value[end]);
    if (stale.length > 0) {
      const fresh = fieldsOf(value, faults, kind);
      setFields({ ...fields, ...Object.fromEntries(stale.map((end) => [end, fresh[end]])) });
    }
  }

  const id = useId();
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
    <div>
      <div className="small flex flex-wrap items-center gap-x-3 gap-y-2">
        {ENDS.map((end) => (
          <div key={end} className="flex items-center gap-3">
            <label
              htmlFor={`${id}-${end}`}
              className={classes('text-muted', kind.type === 'date' && 'max-tab:w-9')}
            >
              {end}
              <span className="sr-only">, {name}</span>
            </label>
            <span className={kind.type === 'date' ? 'w-38' : 'w-24'}>
              <Input
                id={`${id}-${end}`}
                aria-describedby={fields[end].error ? `${id}-${end}-error` : undefined}
                aria-invalid={fields[end].error ? true : undefined}
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
            </span>
          </div>
        ))}
        {unit ? <span className="text-muted">{unit}</span> : null}
      </div>
      {/* Under both fields, where a sentence has room; always there, so that it is read aloud when it is filled. */}
      {ENDS.map((end) => (
        <p
          key={end}
          id={`${id}-${end}-error`}
          role="alert"
          className={fields[end].error ? 'label mt-1 text-madder' : 'sr-only'}
        >
          {fields[end].error ? `Not applied, “${end}”: ${fields[end].error}` : null}
        </p>
      ))}
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

/** One field as a value, or what is wrong with it. Empty asks for nothing. */
function readOne<T extends number | string>(
  { text, unreadable }: FieldState,
  kind: SpanKind<T>,
): { value: T | null; error?: string } {
  if (unreadable) return { value: null, error: kind.incomplete };
  if (text.trim() === '') return { value: null };
  const parsed = kind.shape.safeParse(text);
  if (parsed.success) return { value: parsed.data };
  return { value: null, error: parsed.error.issues[0]?.message ?? kind.incomplete };
}

/** Both fields as values, or what is wrong with them: then the span as a whole is not used. */
function read<T extends number | string>(
  fields: Fields,
  kind: SpanKind<T>,
): { span: Span<T> | null; errors: Partial<Record<End, string>> } {
  const [from, to] = [readOne(fields.from, kind), readOne(fields.to, kind)];
  const errors: Partial<Record<End, string>> = {};
  if (from.error) errors.from = from.error;
  if (to.error) errors.to = to.error;
  if (isReversed(from.value, to.value)) errors.to = kind.reversed;
  const isRight = Object.keys(errors).length === 0;
  return { span: isRight ? { from: from.value, to: to.value } : null, errors };
}
