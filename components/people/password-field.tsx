'use client';

import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';

/** One password; what may be pasted and shown by a password manager is left to it. */
export function PasswordField({
  label,
  value,
  onChange,
  error,
  isNew = false,
}: {
  label: string;
  value: string;
  onChange: (value: string) => void;
  error: string | undefined;
  /** Says what a new one must be like. */
  isNew?: boolean;
}) {
  return (
    <Field
      label={label}
      error={error}
      hint={isNew ? 'At least 15 characters; a few words that do not belong together do well.' : undefined}
    >
      {(control) => (
        <Input
          {...control}
          type="password"
          autoComplete={isNew ? 'new-password' : 'current-password'}
          value={value}
          onChange={(event) => onChange(event.target.value)}
        />
      )}
    </Field>
  );
}
