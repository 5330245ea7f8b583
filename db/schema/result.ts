import { sql } from 'drizzle-orm';
import {
  bigint,
  doublePrecision,
  index,
  integer,
  jsonb,
  pgEnum,
  pgTable,
  primaryKey,
  text,
  uuid,
} from 'drizzle-orm/pg-core';
import type { AnalysisFailure, AnalysisResult, AnalysisSettings } from '../../analysis/types';
import { momentByDatabase, tsvector } from './columns';
import { entry } from './entry';
import { notebook } from './notebook';

export const verdict = pgEnum('verdict', ['free', 'directed', 'confined', 'anomalous', 'undecided']);
export const blockStatus = pgEnum('block_status', ['empty', 'waiting', 'done', 'failed']);

/** Outcome of one analysis, at the address SHA-256(readings, settings, engine). Computed once, kept, insert-only. */
export const result = pgTable('result', {
  address: text('address').primaryKey(),
  engine: text('engine').notNull(),
  outcome: jsonb('outcome').$type<AnalysisResult | AnalysisFailure>().notNull(),
  milliseconds: integer('milliseconds').notNull(),
  at: momentByDatabase('at'),
});

/** What the projector read from the committed updates of an entry. Derived; can be made anew from the record. */
export const entryText = pgTable('entry_text', {
  entryId: uuid('entry_id')
    .primaryKey()
    .references(() => entry.id, { onDelete: 'restrict' }),
  epoch: integer('epoch').notNull(),
  seq: bigint('seq', { mode: 'number' }).notNull(),
  plain: text('plain').notNull(),
  /** For the full-text search; the database makes it of `plain`. */
  words: tsvector('words').generatedAlwaysAs(sql`to_tsvector('english', left("plain", 400000))`),
  at: momentByDatabase('at'),
});

/** The diffusion blocks of an entry with their current results: the only results shown as the record and searched. */
export const blockResult = pgTable(
  'block_result',
  {
    entryId: uuid('entry_id')
      .notNull()
      .references(() => entry.id, { onDelete: 'restrict' }),
    /** Copied from the entry, so that a search by rights needs no join. */
    notebookId: uuid('notebook_id')
      .notNull()
      .references(() => notebook.id, { onDelete: 'restrict' }),
    blockId: text('block_id').notNull(),
    /** Place among the entry's blocks, from 1: "Block 2". */
    position: integer('position').notNull(),
    caption: text('caption').notNull().default(''),
    readingIds: uuid('reading_ids').array().notNull(),
    settings: jsonb('settings').$type<AnalysisSettings>().notNull(),
    status: blockStatus('status').notNull(),
    /** Why there is no result, for people; empty when there is one. */
    message: text('message').notNull().default(''),
    address: text('address').references(() => result.address, { onDelete: 'restrict' }),
    verdict: verdict('verdict'),
    d: doublePrecision('d'),
    dLo: doublePrecision('d_lo'),
    dHi: doublePrecision('d_hi'),
    at: momentByDatabase('at'),
  },
  (table) => [
    primaryKey({ columns: [table.entryId, table.blockId] }),
    index('block_result_by_d').on(table.notebookId, table.verdict, table.d),
  ],
);
