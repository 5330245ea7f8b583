import { integer, pgTable, primaryKey, text } from 'drizzle-orm/pg-core';
import { bytea, momentByDatabase } from './columns';

/** How often something was tried in its present span of time; in the database, so that all processes count together. */
export const attempt = pgTable(
  'attempt',
  {
    /** What is counted: one of the names in db/limits.ts. */
    kind: text('kind').notNull(),
    /** SHA-256 of a name or a network address: what strangers type is not kept. */
    key: bytea('key').notNull(),
    startedAt: momentByDatabase('started_at'),
    count: integer('count').notNull(),
  },
  (table) => [primaryKey({ columns: [table.kind, table.key] })],
);
