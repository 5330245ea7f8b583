import { sql } from 'drizzle-orm';
import { index, integer, jsonb, pgEnum, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { bytea, moment, momentByDatabase } from './columns';
import { person } from './person';

export const linkKind = pgEnum('link_kind', ['invitation', 'reset']);

/**
 * A way to set a password that was sent by mail. The secret in it is made at the moment of sending and stands nowhere but
 * in that mail; here is only its hash.
 */
export const passwordLink = pgTable(
  'password_link',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'restrict' }),
    kind: linkKind('kind').notNull(),
    /** SHA-256 of the secret, 32 bytes. */
    secretHash: bytea('secret_hash').notNull().unique(),
    madeAt: momentByDatabase('made_at'),
    expiresAt: moment('expires_at').notNull(),
    /** Used, or replaced by a newer one, or taken back with the account. */
    endedAt: moment('ended_at'),
  },
  (table) => [index('password_link_by_person').on(table.personId)],
);

/**
 * Mail to be sent: written in the transaction of the thing itself, so that neither happens without the other, and sent
 * later by the mail process. The text is not kept, only what it is made from.
 */
export const mail = pgTable(
  'mail',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    /** Which text: one of the names in db/mail/letters.ts. */
    kind: text('kind').notNull(),
    /** Whom it is about; null while only the asked name of a reset is known. */
    personId: uuid('person_id').references(() => person.id, { onDelete: 'restrict' }),
    /** Where to, if not to the person's address of the day of sending. */
    address: text('address'),
    details: jsonb('details').notNull().default({}),
    queuedAt: momentByDatabase('queued_at'),
    /** When it was given to the queue, which tries until it is sent. */
    handedAt: moment('handed_at'),
    /** When a mail server took it. */
    sentAt: moment('sent_at'),
    /** When it was found that there is nothing to send: nobody has this name, the account is closed. */
    droppedAt: moment('dropped_at'),
    tries: integer('tries').notNull().default(0),
    lastFault: text('last_fault').notNull().default(''),
  },
  (table) => [
    index('mail_not_handed')
      .on(table.queuedAt)
      .where(sql`${table.handedAt} IS NULL`),
    index('mail_by_person').on(table.personId, table.queuedAt),
  ],
);
