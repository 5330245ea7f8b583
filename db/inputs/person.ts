import { z } from 'zod';

/** Unassigned, control and direction characters could make two names look alike or hide part of one. */
const HIDDEN = /[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]/u;

/**
 * An e-mail address in the one form that is stored and compared: compatibility characters, case and a trailing dot
 * folded, so that one person cannot have two accounts by writing the address differently.
 */
export const emailAddress = z
  .string({ error: 'Give an e-mail address.' })
  .transform((text) => text.normalize('NFKC').trim().toLowerCase().replace(/\.$/, ''))
  .pipe(z.email('Give an e-mail address, such as name@lab.example.').max(200, 'At most 200 characters.'));

/** Fifteen characters where a password is the only factor: NIST SP 800-63B-4, section 3.1.1. No rules about kinds. */
export const newPassword = z
  .string({ error: 'Give a password.' })
  .min(15, 'A password must have at least 15 characters; a few words in a row do well.')
  .max(1000, 'At most 1,000 characters.');

const loginName = z
  .string({ error: 'Give a login name.' })
  .trim()
  .toLowerCase()
  .regex(
    /^[a-z][a-z0-9._-]{1,39}$/,
    'Two to forty letters, digits, dots, hyphens or underscores, starting with a letter.',
  );

const printedName = z
  .string({ error: 'Give the name.' })
  .transform((text) => text.normalize('NFC').trim())
  .pipe(
    z
      .string()
      .min(1, 'Give the name.')
      .max(100, 'At most 100 characters.')
      .refine((text) => !HIDDEN.test(text), 'This name contains characters that cannot be seen.'),
  );

const role = z.enum(['pi', 'researcher', 'guest'], { error: 'The role is pi, researcher or guest.' });

export const addPersonInput = z.strictObject({
  /** Chosen once, never changed, never given to anybody else. */
  login: loginName,
  email: emailAddress,
  /** As it is printed under what the person writes and signs. */
  name: printedName,
  role,
  admin: z.boolean().default(false),
  password: newPassword,
});
export type AddPersonInput = z.output<typeof addPersonInput>;

export const inviteInput = z.strictObject({
  login: loginName,
  email: emailAddress,
  name: printedName,
  role,
  admin: z.boolean().default(false),
  /** The notebook that the person joins at once; must be one that the inviter owns. */
  notebookId: z.uuid('Choose a notebook.').nullable().default(null),
  memberRole: z
    .enum(['editor', 'reader', 'witness'], { error: 'Choose editor, reader or witness.' })
    .default('reader'),
});
export type InviteInput = z.output<typeof inviteInput>;

export const personIdInput = z.strictObject({ personId: z.uuid('There is no such person.') });

export const changeRoleInput = z.strictObject({ ...personIdInput.shape, role, admin: z.boolean() });
export type ChangeRoleInput = z.output<typeof changeRoleInput>;

export const deactivateInput = z.strictObject({
  ...personIdInput.shape,
  reason: z.string().trim().max(500, 'At most 500 characters.').default(''),
});
export type DeactivateInput = z.output<typeof deactivateInput>;

export const handOverInput = z.strictObject({
  ...personIdInput.shape,
  toPersonId: z.uuid('Choose who takes the notebooks over.'),
});
export type HandOverInput = z.output<typeof handOverInput>;

export const setPasswordInput = z.strictObject({
  secret: z
    .string()
    .regex(/^[A-Za-z0-9_-]{43}$/, 'This link is not complete. Copy the whole address from the mail.'),
  password: newPassword,
});
export type SetPasswordInput = z.output<typeof setPasswordInput>;

export const askResetInput = z.strictObject({
  name: z
    .string({ error: 'Enter your login name or e-mail address.' })
    .trim()
    .toLowerCase()
    .min(1, 'Enter your login name or e-mail address.')
    .max(200, 'At most 200 characters.')
    .refine((text) => !HIDDEN.test(text), 'This contains characters that cannot be seen.'),
});

const currentPassword = z
  .string({ error: 'Enter your present password.' })
  .min(1, 'Enter your present password.')
  .max(1000, 'At most 1,000 characters.');

export const changePasswordInput = z.strictObject({ current: currentPassword, password: newPassword });
export type ChangePasswordInput = z.output<typeof changePasswordInput>;

export const changeNameInput = z.strictObject({ name: printedName });
export const changeEmailInput = z.strictObject({ email: emailAddress, current: currentPassword });
export type ChangeEmailInput = z.output<typeof changeEmailInput>;

export const loginIdInput = z.strictObject({ loginId: z.uuid('There is no such login.') });

/** The group that an empty installation is set up for. */
export const groupInput = z.strictObject({
  name: z.string().trim().min(1, 'Give the group a name.').max(100, 'At most 100 characters.'),
  timeZone: z.string().refine(isTimeZone, 'Give a time zone by its IANA name, such as Europe/Oslo.'),
});
export type GroupInput = z.output<typeof groupInput>;

function isTimeZone(name: string): boolean {
  try {
    // Offsets such as "+02:00" are accepted there too, but know no summer time.
    return (
      new Intl.DateTimeFormat('en', { timeZone: name }).resolvedOptions().timeZone !== '' &&
      /^[A-Z]/.test(name)
    );
  } catch {
    return false;
  }
}
