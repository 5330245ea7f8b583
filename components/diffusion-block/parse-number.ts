import { BLOCK_DEFAULTS, blockAttributes, type BlockAttributes } from '@/db/inputs/block-settings';

/** Settings that are one number or nothing. */
export type NumberSetting =
  | 'fitLagFirst'
  | 'fitLagLast'
  | 'minTrackFrames'
  | 'exposureSeconds'
  | 'exposureFraction'
  | 'sigma'
  | 'viscosity'
  | 'temperature'
  | 'particleDiameter';

/** What a number of this setting must be, as a sentence under its field. */
const RULES: Readonly<Record<NumberSetting, string>> = {
  fitLagFirst: 'Enter a whole number from 1.',
  fitLagLast: 'Enter a whole number from 1.',
  minTrackFrames: 'Enter a whole number from 2.',
  exposureSeconds: 'Enter a time above zero.',
  exposureFraction: 'Enter a part from 0 to 1.',
  sigma: 'Enter zero or a length above it.',
  viscosity: 'Enter a viscosity above zero.',
  temperature: 'Enter a temperature from −50 to 150 °C.',
  particleDiameter: 'Enter a diameter above zero.',
};

export type ParsedNumber = { readonly value: number | null } | { readonly error: string };

/**
 * A number as people type it: "0.02", "0,02", "2e-3", "−5"; empty is the setting's default, mostly "not stated". Never
 * guesses: what could be read in two ways is an error, and so is what the setting cannot be.
 */
export function parseNumber(text: string, setting: NumberSetting): ParsedNumber {
  const trimmed = text.trim().replace(/^[−–]/, '-');
  if (trimmed === '') return { value: BLOCK_DEFAULTS[setting] };
  if (/^-?\d{1,3}(,\d{3})+$/.test(trimmed) && !trimmed.startsWith('0') && !trimmed.startsWith('-0')) {
    return { error: 'A comma could be a decimal mark or stand between thousands. Write it without.' };
  }
  const plain = trimmed.replace(',', '.');
  if (!/^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d{1,3})?$/i.test(plain))
    return { error: 'Enter a number, such as 0.02.' };
  // Adding zero turns −0 into 0.
  const parsed = blockAttributes[setting].safeParse(Number(plain) + 0);
  return parsed.success ? { value: parsed.data } : { error: RULES[setting] };
}

/** Rules between two settings, which neither can check alone. @returns a sentence, or null. */
export function conflictOf(
  block: BlockAttributes,
  setting: NumberSetting,
  value: number | null,
): string | null {
  const first = setting === 'fitLagFirst' ? value : block.fitLagFirst;
  const last = setting === 'fitLagLast' ? value : block.fitLagLast;
  if (setting !== 'fitLagFirst' && setting !== 'fitLagLast') return null;
  return last !== null && last <= (first ?? 1) ? 'The last lag must be larger than the first.' : null;
}
