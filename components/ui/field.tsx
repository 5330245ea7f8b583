'use client';

import { useId, type ReactNode } from 'react';
import { classes } from './classes';

/** What a control must carry so that its label, hint and error are read with it. */
export interface FieldControl {
  readonly id: string;
  readonly 'aria-describedby': string | undefined;
  readonly 'aria-invalid': true | undefined;
}

/**
 * A label, a control, a hint, and what is wrong: `<Field label="Title" error={…}>{(control) => <Input {...control} />}</Field>`.
 * The error is a sentence; it stands directly under the control and is announced when it appears.
 */
export function Field({
  label,
  hint,
  error,
  unit,
  className,
  children,
}: {
  label: ReactNode;
  hint?: ReactNode;
  error?: string | undefined;
  /** Shown after the control, e.g. "µm". */
  unit?: ReactNode;
  className?: string;
  children: (control: FieldControl) => ReactNode;
}) {
  const id = useId();
  const described = [hint ? `${id}-hint` : null, error ? `${id}-error` : null].filter(Boolean).join(' ');
  return (
    <div className={classes('space-y-1', className)}>
      <label htmlFor={id} className="label block font-semibold text-ink">
        {label}
      </label>
      <div className={unit ? 'flex items-center gap-2' : undefined}>
        <div className="grow">
          {children({
            id,
            'aria-describedby': described || undefined,
            'aria-invalid': error ? true : undefined,
          })}
        </div>
        {unit ? <span className="label text-muted">{unit}</span> : null}
      </div>
      {hint ? (
        <p id={`${id}-hint`} className="label text-muted">
          {hint}
        </p>
      ) : null}
      <p id={`${id}-error`} role="alert" className={error ? 'label text-madder' : 'sr-only'}>
        {error}
      </p>
    </div>
  );
}
