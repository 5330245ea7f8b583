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

export const addPersonInput = z.strictObject({
  /** Chosen once, never changed, never given to anybody else. */
  login: z
    .string({ error: 'Give a login name.' })
    .trim()
    .toLowerCase()
    .regex(
      /^[a-z][a-z0-9._-]{1,39}$/,
      'Two to forty letters, digits, dots, hyphens or underscores, starting with a letter.',
    ),
  email: emailAddress,
  /** As it is printed under what the person writes and signs. */
  name: z
    .string({ error: 'Give the name.' })
    .transform((text) => text.normalize('NFC').trim())
    .pipe(
      z
        .string()
        .min(1, 'Give the name.')
        .max(100, 'At most 100 characters.')
        .refine((text) => !HIDDEN.test(text), 'This name contains characters that cannot be seen.'),
    ),
  role: z.enum(['pi', 'researcher', 'guest'], { error: 'The role is pi, researcher or guest.' }),
  admin: z.boolean().default(false),
  password: newPassword,
});
export type AddPersonInput = z.output<typeof addPersonInput>;

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
