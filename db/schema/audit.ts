import { bigint, index, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { momentByDatabase } from './columns';
import { entry } from './entry';
import { notebook } from './notebook';
import { login, person } from './person';

/** Who did what, when, from what to what, and why. Insert-only; written in the transaction of the thing itself. */
export const audit = pgTable(
  'audit',
  {
    id: bigint('id', { mode: 'number' }).primaryKey().generatedAlwaysAsIdentity(),
    at: momentByDatabase('at'),
    /** Null where nobody was known, e.g. a failed sign-in. */
    personId: uuid('person_id').references(() => person.id, { onDelete: 'restrict' }),
    loginId: uuid('login_id').references(() => login.id, { onDelete: 'restrict' }),
    /** Dotted, lower case: "entry.create", "login.end". */
    kind: text('kind').notNull(),
    notebookId: uuid('notebook_id').references(() => notebook.id, { onDelete: 'restrict' }),
    entryId: uuid('entry_id').references(() => entry.id, { onDelete: 'restrict' }),
    subject: text('subject').notNull().default(''),
    before: jsonb('before'),
    after: jsonb('after'),
    reason: text('reason').notNull().default(''),
  },
  (table) => [
    index('audit_by_entry').on(table.entryId, table.at),
    index('audit_by_person').on(table.personId, table.at),
  ],
);
