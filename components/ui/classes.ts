/** Joins class names; whatever is false, null or empty is left out. */
export function classes(...names: (string | false | null | undefined)[]): string {
  return names.filter(Boolean).join(' ');
}

/** What the inputs and selects have in common: a hairline box that is easy to hit with a finger. */
export const controlClasses =
  'block w-full rounded-sm border border-control bg-page px-3 py-2 font-sans text-small text-ink ' +
  'min-h-9 max-desk:min-h-11 pointer-coarse:min-h-11 ' +
  'aria-invalid:border-madder disabled:opacity-60';
