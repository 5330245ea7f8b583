import { sql } from 'drizzle-orm';
import {
  bigint,
  check,
  date,
  index,
  integer,
  pgEnum,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { bytea, momentByDatabase } from './columns';
import { notebook } from './notebook';
import { login, person } from './person';

export const entryState = pgEnum('entry_state', ['draft', 'closing', 'signed', 'countersigned', 'void']);

/** One page of the notebook. Its body is the sum of its `entry_update` rows; this row holds the head of that chain. */
export const entry = pgTable(
  'entry',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    notebookId: uuid('notebook_id')
      .notNull()
      .references(() => notebook.id, { onDelete: 'restrict' }),
    number: integer('number').notNull(),
    title: text('title').notNull(),
    /** Day of the experiment in the lab's time zone. */
    experimentDate: date('experiment_date', { mode: 'string' }).notNull(),
    state: entryState('state').notNull().default('draft'),
    createdBy: uuid('created_by')
      .notNull()
      .references(() => person.id, { onDelete: 'restrict' }),
    createdAt: momentByDatabase('created_at'),
    /** Raised when the document starts anew (amendment, recovery); texts of two epochs are never merged. */
    epoch: integer('epoch').notNull().default(1),
    /** Raised with every closing; an update must carry the number it was written under. */
    lock: integer('lock').notNull().default(0),
    headSeq: bigint('head_seq', { mode: 'number' }).notNull().default(0),
    headChain: bytea('head_chain')
      .notNull()
      .default(sql`'\\x0000000000000000000000000000000000000000000000000000000000000000'::bytea`),
    /** Bytes of all update payloads of this epoch. */
    bytes: bigint('bytes', { mode: 'number' }).notNull().default(0),
    editedAt: momentByDatabase('edited_at'),
  },
  (table) => [
    unique('entry_number').on(table.notebookId, table.number),
    index('entry_by_notebook_date').on(table.notebookId, table.experimentDate),
    check('entry_title_length', sql`length(${table.title}) <= 300`),
  ],
);

/** The log that the body is: insert-only, gap-free, chained by hash (integrity rule C2). */
export const entryUpdate = pgTable(
  'entry_update',
  {
    entryId: uuid('entry_id')
      .notNull()
      .references(() => entry.id, { onDelete: 'restrict' }),
    epoch: integer('epoch').notNull(),
    seq: bigint('seq', { mode: 'number' }).notNull(),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'restrict' }),
    /** The login it came through; null for edits that the server makes on somebody's behalf. */
    loginId: uuid('login_id').references(() => login.id, { onDelete: 'restrict' }),
    /** Yjs client id that wrote it. */
    client: bigint('client', { mode: 'number' }).notNull(),
    batch: uuid('batch').notNull(),
    ordinal: integer('ordinal').notNull(),
    payload: bytea('payload').notNull(),
    chain: bytea('chain').notNull(),
    at: momentByDatabase('at'),
  },
  (table) => [
    primaryKey({ columns: [table.entryId, table.epoch, table.seq] }),
    // Makes the retry of a batch whose COMMIT got no answer safe: the same batch cannot enter twice.
    unique('entry_update_batch').on(table.entryId, table.batch, table.ordinal),
  ],
);

/** Which account owns a Yjs client id in an entry; claimed at join, so that nobody can write under another's id. */
export const entryClient = pgTable(
  'entry_client',
  {
    entryId: uuid('entry_id')
      .notNull()
      .references(() => entry.id, { onDelete: 'restrict' }),
    epoch: integer('epoch').notNull(),
    client: bigint('client', { mode: 'number' }).notNull(),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'restrict' }),
    at: momentByDatabase('at'),
  },
  (table) => [primaryKey({ columns: [table.entryId, table.epoch, table.client] })],
);

/** A state replayed from the rows up to `seq`, so that a long log opens quickly. A convenience: the rows are the record. */
export const entrySnapshot = pgTable(
  'entry_snapshot',
  {
    entryId: uuid('entry_id')
      .notNull()
      .references(() => entry.id, { onDelete: 'restrict' }),
    epoch: integer('epoch').notNull(),
    seq: bigint('seq', { mode: 'number' }).notNull(),
    state: bytea('state').notNull(),
    at: momentByDatabase('at'),
  },
  (table) => [primaryKey({ columns: [table.entryId, table.epoch, table.seq] })],
);
