import { boolean, check, integer, interval, pgTable, text } from 'drizzle-orm/pg-core';
import { sql } from 'drizzle-orm';

/** The one group that this server belongs to. Its time zone rules every displayed time and the day of an entry. */
export const lab = pgTable(
  'lab',
  {
    id: integer('id').primaryKey().default(1),
    name: text('name').notNull(),
    timeZone: text('time_zone').notNull(),
  },
  (table) => [check('lab_is_one', sql`${table.id} = 1`)],
);

/** Shifts the database's clock function while the demo is filled; empty at all other times. */
export const clockOffset = pgTable(
  'clock_offset',
  {
    only: boolean('only').primaryKey().default(true),
    shift: interval('shift').notNull(),
  },
  (table) => [check('clock_offset_is_one', sql`${table.only}`)],
);
