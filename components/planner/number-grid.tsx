'use client';

import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import type { NumberRule } from './number-inputs';

/** A row of labelled numbers. */
export function NumberGrid<Name extends string>({
  rules,
  texts,
  errors,
  onChange,
}: {
  rules: Readonly<Record<Name, NumberRule>>;
  texts: Readonly<Record<Name, string>>;
  errors: Partial<Record<Name, string>>;
  onChange: (name: Name, text: string) => void;
}) {
  return (
    <div className="grid grid-cols-2 gap-x-5 gap-y-4 tab:grid-cols-4">
      {(Object.keys(rules) as Name[]).map((name) => (
        <Field key={name} label={rules[name].label} unit={rules[name].unit || undefined} error={errors[name]}>
          {(control) => (
            <Input
              {...control}
              inputMode="decimal"
              autoComplete="off"
              className="w-full"
              value={texts[name]}
              onChange={({ target }) => onChange(name, target.value)}
            />
          )}
        </Field>
      ))}
    </div>
  );
}
