import { index, integer, pgEnum, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core';
import { moment, momentByDatabase } from './columns';
import { person } from './person';

export const memberRole = pgEnum('member_role', ['owner', 'editor', 'reader', 'witness']);

export const notebook = pgTable('notebook', {
  id: uuid('id').primaryKey().defaultRandom(),
  /** Short capital code that starts every entry number, e.g. "TRB". */
  code: text('code').notNull().unique(),
  title: text('title').notNull(),
  description: text('description').notNull().default(''),
  /** Number of the last entry started; numbers are never used twice. */
  lastNumber: integer('last_number').notNull().default(0),
  createdBy: uuid('created_by')
    .notNull()
    .references(() => person.id, { onDelete: 'restrict' }),
  createdAt: momentByDatabase('created_at'),
  archivedAt: moment('archived_at'),
});

export const notebookMember = pgTable(
  'notebook_member',
  {
    notebookId: uuid('notebook_id')
      .notNull()
      .references(() => notebook.id, { onDelete: 'restrict' }),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'restrict' }),
    role: memberRole('role').notNull(),
    since: momentByDatabase('since'),
  },
  (table) => [
    primaryKey({ columns: [table.notebookId, table.personId] }),
    index('member_by_person').on(table.personId),
  ],
);
