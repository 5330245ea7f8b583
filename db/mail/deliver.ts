import { randomBytes } from 'node:crypto';
import { eq, or, sql } from 'drizzle-orm';
import type { Database, Transaction } from '../client';
import { endLinks } from '../commands/person/end-links-and-logins';
import { hashSecret } from '../commands/person/set-password';
import { findLab } from '../queries/lab/find-lab';
import { audit, mail, passwordLink, person } from '../schema/index';
import { isLetterKind, LINK_LIFE, writeLetter, type Letter, type LetterKind } from './letters';

/** A letter with what its envelope needs. `id` stays the same when a letter is sent again, for the reader's program. */
export interface OutgoingMail extends Letter {
  readonly id: string;
  readonly to: { readonly name: string; readonly address: string };
}

export type SendMail = (outgoing: OutgoingMail) => Promise<void>;

/**
 * Sends one letter of the outbox, unless it is sent already or there is nobody to send it to. A link's secret is made
 * here, for this mail alone, and only its hash is stored: a letter that is tried again carries a new one.
 * @param origin - where Motebook is, without a slash at the end.
 * @throws whatever `send` throws; the fault is noted in the outbox, and the queue tries again.
 */
export async function deliver(db: Database, send: SendMail, origin: string, mailId: string): Promise<void> {
  const outgoing = await db.transaction((tx) => prepare(tx, origin, mailId));
  if (!outgoing) return;
  try {
    await send(outgoing);
  } catch (error) {
    const lastFault = (error instanceof Error ? error.message : String(error)).slice(0, 500);
    await db
      .update(mail)
      .set({ lastFault, tries: sql`${mail.tries} + 1` })
      .where(eq(mail.id, mailId));
    throw error;
  }
  await db
    .update(mail)
    .set({ sentAt: sql`motebook_now()`, tries: sql`${mail.tries} + 1`, lastFault: '' })
    .where(eq(mail.id, mailId));
}

async function prepare(tx: Transaction, origin: string, mailId: string): Promise<OutgoingMail | null> {
  const [row] = await tx.select().from(mail).where(eq(mail.id, mailId)).for('update');
  if (!row || row.sentAt || row.droppedAt) return null;
  const { kind } = row;
  if (!isLetterKind(kind)) throw new Error(`no letter is called ${kind}`);
  const details = row.details as Readonly<Record<string, string>>;
  const who = await findReader(tx, row.personId, details.asked);
  // A closed account is told nothing; an invitation that was accepted in the meantime needs no second link.
  if (!who?.active || (kind === 'invitation' && who.passwordHash !== null)) {
    await tx
      .update(mail)
      .set({ droppedAt: sql`motebook_now()` })
      .where(eq(mail.id, mailId));
    return null;
  }
  if (!row.personId) await tx.update(mail).set({ personId: who.id }).where(eq(mail.id, mailId));
  const lab = await findLab(tx);
  const letter = writeLetter(kind, {
    group: lab?.name ?? 'group',
    name: who.name,
    login: who.login,
    origin,
    link: await makeLink(tx, kind, who, origin),
    inviter: details.inviter ?? 'An administrator',
    newAddress: details.newAddress ?? who.email,
  });
  return { ...letter, id: mailId, to: { name: who.name, address: row.address ?? who.email } };
}

async function findReader(tx: Transaction, personId: string | null, asked: string | undefined) {
  const name = asked ?? '';
  const [who] = await tx
    .select()
    .from(person)
    .where(personId ? eq(person.id, personId) : or(eq(person.login, name), eq(person.email, name)));
  return who;
}

/** The secret stands behind "#", which browsers keep to themselves: it reaches no log of a server (S52). */
async function makeLink(
  tx: Transaction,
  kind: LetterKind,
  who: { id: string; login: string },
  origin: string,
): Promise<string> {
  if (kind !== 'invitation' && kind !== 'reset') return '';
  const secret = randomBytes(32).toString('base64url');
  await endLinks(tx, who.id);
  await tx.insert(passwordLink).values({
    personId: who.id,
    kind,
    secretHash: hashSecret(secret),
    expiresAt: sql`motebook_now() + make_interval(secs => ${LINK_LIFE[kind].seconds})`,
  });
  await tx
    .insert(audit)
    .values({ kind: 'password.link', personId: who.id, subject: who.login, reason: kind });
  return `${origin}/set-password#${secret}`;
}
