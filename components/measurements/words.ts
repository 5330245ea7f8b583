import type { BoundedCount } from '@/db/inputs/measurement';

/** "1 track", "1,200 tracks". */
export const someOf = (count: number, what: string): string =>
  `${count.toLocaleString('en')} ${what}${count === 1 ? '' : 's'}`;

/** As `someOf`, for a count that stopped at its bound: "more than 1,000 measurements". */
export const someOfBounded = ({ count, more }: BoundedCount, what: string): string =>
  `${more ? 'more than ' : ''}${someOf(count, what)}`;

/** Starts a sentence. */
export const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);
