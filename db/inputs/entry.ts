import { z } from 'zod';
import { dayOfExperiment } from './measurement';

export const TITLE_LENGTH_MAX = 300;

export const startEntryInput = z.strictObject({ notebookId: z.uuid('Choose a notebook.') });
export type StartEntryInput = z.output<typeof startEntryInput>;

/** A title is one line; line breaks from a paste become spaces. It may be empty: the number names the entry too. */
export const entryTitle = z
  .string()
  .transform((text) =>
    text
      .normalize('NFC')
      // Control characters, among them the zero byte, which PostgreSQL cannot hold, and marks that turn the reading direction.
      .replace(/[\p{Cc}\u2028\u2029\u202A-\u202E\u2066-\u2069]+/gu, ' ')
      .replace(/ {2,}/g, ' ')
      .trim(),
  )
  .pipe(
    z
      .string()
      .max(TITLE_LENGTH_MAX, `A title has at most ${TITLE_LENGTH_MAX} characters. Shorten it a little.`),
  );

export const renameEntryInput = z.strictObject({ entryId: z.uuid(), title: entryTitle });
export type RenameEntryInput = z.output<typeof renameEntryInput>;

export const setExperimentDateInput = z.strictObject({
  entryId: z.uuid(),
  /** The lab's calendar day, year-month-day. */
  experimentDate: dayOfExperiment.refine((day) => day < '2200-01-01', 'Enter a date before 2200.'),
});
export type SetExperimentDateInput = z.output<typeof setExperimentDateInput>;
