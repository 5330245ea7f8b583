import { sql } from 'drizzle-orm';
import { boolean, check, index, pgEnum, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { moment, momentByDatabase } from './columns';

export const personRole = pgEnum('person_role', ['pi', 'researcher', 'guest']);

/** Somebody with an account. Rows are never deleted: names stay valid under what they wrote. */
export const person = pgTable(
  'person',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    /** Login name: a handle chosen once, never changed, never given to anybody else. Lower case. */
    login: text('login').notNull().unique(),
    /** Lower case. */
    email: text('email').notNull().unique(),
    /** As it is printed under a signature. */
    name: text('name').notNull(),
    role: personRole('role').notNull(),
    admin: boolean('admin').notNull().default(false),
    active: boolean('active').notNull().default(true),
    /** argon2id, PHC string; null from the invitation until its link was used: nobody can sign in then. */
    passwordHash: text('password_hash'),
    createdAt: momentByDatabase('created_at'),
  },
  // Sign-in takes either; a login name that looked like an address could meet somebody else's.
  (table) => [
    check('person_login_form', sql`${table.login} ~ '^[a-z][a-z0-9._-]{1,39}$'`),
    check(
      'person_email_form',
      sql`${table.email} = lower(${table.email}) AND ${table.email} ~ '^[^@ ]+@[^@ ]+$'`,
    ),
  ],
);

/** One signed-in browser. The token in the cookie only names this row; the row decides, on every request and socket. */
export const login = pgTable(
  'login',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    personId: uuid('person_id')
      .notNull()
      .references(() => person.id, { onDelete: 'restrict' }),
    startedAt: momentByDatabase('started_at'),
    /** Last request by a person (websocket pings do not count). */
    seenAt: momentByDatabase('seen_at'),
    endedAt: moment('ended_at'),
    userAgent: text('user_agent').notNull().default(''),
  },
  (table) => [index('login_by_person').on(table.personId)],
);
