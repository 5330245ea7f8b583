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

export const MEMBER_ROLES = ['owner', 'editor', 'reader', 'witness'] as const;

/** Adds somebody to a notebook, by login name or e-mail address. */
export const addMemberInput = z.strictObject({
  notebookId: z.uuid(),
  who: z
    .string()
    .trim()
    .toLowerCase()
    .min(1, 'Enter a login name or an e-mail address.')
    .max(200, 'This is too long.'),
  role: z.enum(MEMBER_ROLES),
});
export type AddMemberInput = z.output<typeof addMemberInput>;

/** Gives a member another role; null: no longer a member. */
export const changeMemberInput = z.strictObject({
  notebookId: z.uuid(),
  personId: z.uuid(),
  role: z.enum(MEMBER_ROLES).nullable(),
});
export type ChangeMemberInput = z.output<typeof changeMemberInput>;
