import { asc, desc, sql } from 'drizzle-orm';
import type { Connection } from '../../client';
import { AppError } from '../../errors';
import { may, type Actor, type PersonRole } from '../../policies/may';
import { login, person } from '../../schema/index';

export interface PersonLine {
  readonly id: string;
  readonly login: string;
  readonly email: string;
  readonly name: string;
  readonly role: PersonRole;
  readonly admin: boolean;
  readonly active: boolean;
  /** Has never set a password. */
  readonly invited: boolean;
  readonly createdAt: Date;
  readonly lastSeenAt: Date | null;
  readonly notebooksOwned: number;
}

/** Columns of a `PersonLine`; the password's hash itself is never read. */
export const personLine = {
  id: person.id,
  login: person.login,
  email: person.email,
  name: person.name,
  role: person.role,
  admin: person.admin,
  active: person.active,
  invited: sql<boolean>`${person.passwordHash} IS NULL`,
  createdAt: person.createdAt,
  // Written out: where one table is asked, drizzle leaves its name away, and "id" would be the inner table's.
  lastSeenAt:
    sql<Date | null>`(SELECT max(l.seen_at) FROM login l WHERE l.person_id = "person"."id")`.mapWith(
      login.seenAt,
    ),
  notebooksOwned: sql<number>`(SELECT count(*)::int FROM notebook_member m
    WHERE m.person_id = "person"."id" AND m.role = 'owner')`,
};

/** Everybody with an account, open ones first, by name. @throws AppError not-found - neither PI nor administrator. */
export async function listPeople(db: Connection, actor: Actor): Promise<PersonLine[]> {
  if (!may(actor, 'people.read', null)) throw new AppError('not-found');
  return db.select(personLine).from(person).orderBy(desc(person.active), asc(person.name), asc(person.login));
}
