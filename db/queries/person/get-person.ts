import { and, asc, desc, eq, isNull, sql } from 'drizzle-orm';
import type { Connection } from '../../client';
import { isInOwnNotebook } from '../../commands/person/send-link';
import { AppError } from '../../errors';
import { may, type Actor, type MemberRole } from '../../policies/may';
import { login, notebook, notebookMember, person } from '../../schema/index';
import { LOGIN_IDLE_MINUTES, LOGIN_TOTAL_HOURS } from '../../session-cookie';
import { personLine, type PersonLine } from './list-people';

export interface LoginLine {
  readonly id: string;
  readonly startedAt: Date;
  readonly seenAt: Date;
  /** What the browser called itself. */
  readonly userAgent: string;
  /** The one that asks. */
  readonly own: boolean;
}

export interface PersonPage extends PersonLine {
  readonly notebooks: readonly { id: string; code: string; title: string; role: MemberRole }[];
  /** Only for administrators. */
  readonly logins: readonly LoginLine[];
  readonly maySendLink: boolean;
  readonly mayManage: boolean;
}

/** One person with their notebooks. @throws AppError not-found - no such person, or one that may not be seen. */
export async function getPerson(db: Connection, actor: Actor, personId: string): Promise<PersonPage> {
  if (!may(actor, 'people.read', null)) throw new AppError('not-found');
  const [line] = await db.select(personLine).from(person).where(eq(person.id, personId));
  if (!line) throw new AppError('not-found');
  const mayManage = may(actor, 'person.manage', null);
  const notebooks = await db
    .select({
      id: notebook.id,
      code: notebook.code,
      title: notebook.title,
      role: notebookMember.role,
    })
    .from(notebookMember)
    .innerJoin(notebook, eq(notebook.id, notebookMember.notebookId))
    .where(eq(notebookMember.personId, personId))
    .orderBy(asc(notebook.code));
  return {
    ...line,
    notebooks,
    logins: mayManage ? await listLogins(db, personId, actor.loginId) : [],
    mayManage,
    maySendLink: may(actor, 'person.send-link', {
      invited: line.invited,
      inOwnNotebook: await isInOwnNotebook(db, actor, personId),
    }),
  };
}

/** The logins that still open something, the latest first. */
export function listLogins(db: Connection, personId: string, ownLoginId: string): Promise<LoginLine[]> {
  return db
    .select({
      id: login.id,
      startedAt: login.startedAt,
      seenAt: login.seenAt,
      userAgent: login.userAgent,
      own: sql<boolean>`${login.id} = ${ownLoginId}`,
    })
    .from(login)
    .where(
      and(
        eq(login.personId, personId),
        isNull(login.endedAt),
        sql`${login.seenAt} > motebook_now() - make_interval(mins => ${LOGIN_IDLE_MINUTES})`,
        sql`${login.startedAt} > motebook_now() - make_interval(hours => ${LOGIN_TOTAL_HOURS})`,
      ),
    )
    .orderBy(desc(login.seenAt));
}

/** One's own address and logins, for the profile page. */
export async function getProfile(
  db: Connection,
  actor: Actor,
): Promise<{ email: string; logins: LoginLine[] }> {
  const [me] = await db.select({ email: person.email }).from(person).where(eq(person.id, actor.personId));
  if (!me) throw new AppError('not-found');
  return { email: me.email, logins: await listLogins(db, actor.personId, actor.loginId) };
}

/** Notebooks that somebody owns and could invite to, by code. */
export function listOwnedNotebooks(
  db: Connection,
  actor: Actor,
): Promise<{ id: string; code: string; title: string }[]> {
  return db
    .select({ id: notebook.id, code: notebook.code, title: notebook.title })
    .from(notebookMember)
    .innerJoin(notebook, eq(notebook.id, notebookMember.notebookId))
    .where(
      and(
        eq(notebookMember.personId, actor.personId),
        eq(notebookMember.role, 'owner'),
        isNull(notebook.archivedAt),
      ),
    )
    .orderBy(asc(notebook.code));
}
