import { bigint, index, integer, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import type { ReadingSpec, ReadingSummary } from '../../analysis/intake/types';
import { moment, momentByDatabase } from './columns';
import { entry } from './entry';
import { login, person } from './person';

/** An upload that somebody started; only such an upload can become an attachment. */
export const uploadTicket = pgTable('upload_ticket', {
  id: uuid('id').primaryKey().defaultRandom(),
  entryId: uuid('entry_id')
    .notNull()
    .references(() => entry.id, { onDelete: 'restrict' }),
  personId: uuid('person_id')
    .notNull()
    .references(() => person.id, { onDelete: 'restrict' }),
  loginId: uuid('login_id')
    .notNull()
    .references(() => login.id, { onDelete: 'restrict' }),
  name: text('name').notNull(),
  bytes: bigint('bytes', { mode: 'number' }).notNull(),
  at: momentByDatabase('at'),
  finishedAt: moment('finished_at'),
});

/** A file that belongs to an entry. Size and hash are those that the server measured. Insert-only. */
export const attachment = pgTable(
  'attachment',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    entryId: uuid('entry_id')
      .notNull()
      .references(() => entry.id, { onDelete: 'restrict' }),
    /** As given by the person, made safe to show; never used as a path. */
    name: text('name').notNull(),
    mediaType: text('media_type').notNull(),
    bytes: bigint('bytes', { mode: 'number' }).notNull(),
    /** 64 hexadecimal digits. */
    sha256: text('sha256').notNull(),
    /** Key under which the file service keeps the bytes. */
    storageKey: text('storage_key').notNull().unique(),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'restrict' }),
    at: momentByDatabase('at'),
  },
  (table) => [index('attachment_by_entry').on(table.entryId)],
);

/** How one attachment is read into positions, as a person confirmed it. Insert-only; a correction is a new reading. */
export const reading = pgTable(
  'reading',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    attachmentId: uuid('attachment_id')
      .notNull()
      .references(() => attachment.id, { onDelete: 'restrict' }),
    /** SHA-256 over file hash and spec (integrity rule 2.2a), 64 hexadecimal digits. */
    hash: text('hash').notNull(),
    spec: jsonb('spec').$type<ReadingSpec>().notNull(),
    summary: jsonb('summary').$type<ReadingSummary>().notNull(),
    problems: integer('problems').notNull().default(0),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'restrict' }),
    at: momentByDatabase('at'),
  },
  (table) => [index('reading_by_attachment').on(table.attachmentId), index('reading_by_hash').on(table.hash)],
);
