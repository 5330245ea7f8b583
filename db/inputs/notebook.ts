import { z } from 'zod';
import { entryTitle } from './entry';

export const createNotebookInput = z.strictObject({
  /** Starts every entry number of the notebook, e.g. "TRB" in "TRB 4". Never changed. */
  code: z
    .string()
    .trim()
    .toUpperCase()
    .regex(/^[A-Z][A-Z0-9]{1,5}$/, 'Two to six letters or digits, starting with a letter: TRB.'),
  title: entryTitle.pipe(z.string().min(1, 'Give the notebook a title.')),
  description: z
    .string()
    .trim()
    .max(2000, 'At most 2,000 characters.')
    .refine((text) => !text.includes('\0'), 'This text contains a character that cannot be stored.')
    .default(''),
});
export type CreateNotebookInput = z.output<typeof createNotebookInput>;
