import type { Connection } from '../client';
import { forgetAttempts, returnAttempt, takeAttempts, type Limited } from './take-attempt';

/** The name as it is counted: what sign-in itself makes of what was typed. */
const folded = (name: string) => name.trim().toLowerCase().slice(0, 300);
const ofName = (name: string): Limited[] => [
  { kind: 'sign-in.name', key: folded(name) },
  { kind: 'sign-in.row', key: folded(name) },
];

/**
 * Counts one try of a password before it is checked.
 * @param address - network address; null where the person is signed in already and only proves to be the same.
 * @throws SlowDown - too many were wrong, whether or not anybody has this name.
 */
export async function takePasswordAttempt(
  db: Connection,
  name: string,
  address: string | null,
): Promise<void> {
  await takeAttempts(db, [
    ...(address === null ? [] : [{ kind: 'sign-in.address' as const, key: address }]),
    ...ofName(name),
  ]);
}

/** The password was right: the row of wrong ones for this name is over, and this address has not failed this time. */
export async function settlePasswordAttempt(
  db: Connection,
  name: string,
  address: string | null,
): Promise<void> {
  await forgetAttempts(db, ofName(name));
  if (address !== null) await returnAttempt(db, { kind: 'sign-in.address', key: address });
}

/** A new password was set: wrong ones before it no longer count, by whichever name they were tried. */
export async function forgetWrongPasswords(db: Connection, names: readonly string[]): Promise<void> {
  for (const name of names) await forgetAttempts(db, ofName(name));
}
