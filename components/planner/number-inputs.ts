import { useState } from 'react';
import { readNumber } from '@/analysis/intake/number';

export interface NumberRule {
  readonly label: string;
  readonly unit: string;
  readonly fits: (value: number) => boolean;
  /** What it must be, said under the field. */
  readonly wants: string;
}

/**
 * Several numbers as people type them. What is wrong stays in its field with a sentence, and `values` is then null, so that
 * nothing is computed from a number that nobody meant.
 */
export function useNumbers<Name extends string>(
  rules: Readonly<Record<Name, NumberRule>>,
  start: Readonly<Record<Name, string>>,
) {
  const [texts, setTexts] = useState(start);
  const values = {} as Record<Name, number>;
  const errors: Partial<Record<Name, string>> = {};
  for (const name of Object.keys(rules) as Name[]) {
    const text = texts[name].trim();
    const value = readNumber(text, text.includes(',') ? ',' : '.');
    if (Number.isNaN(value) || !rules[name].fits(value)) errors[name] = rules[name].wants;
    else values[name] = value;
  }
  return {
    texts,
    errors,
    values: Object.keys(errors).length === 0 ? values : null,
    set: (name: Name, text: string) => setTexts((all) => ({ ...all, [name]: text })),
  };
}
