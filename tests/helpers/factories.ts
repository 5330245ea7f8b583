import { randomUUID } from 'node:crypto';
import { sql } from 'drizzle-orm';
import type { Connection, Database } from '../../db/client';
import type { Actor, MemberRole, PersonRole } from '../../db/policies/may';
import { attachment, lab, login, notebook, notebookMember, person } from '../../db/schema/index';

let running = 0;
const next = () => (running += 1);

/** Any valid argon2id string; tests that sign in make a real one with hashPassword. */
const SOME_HASH =
  '$argon2id$v=19$m=47104,t=1,p=1$c29tZXNhbHRzb21lc2FsdA$Y2hlY2tzdW1jaGVja3N1bWNoZWNrc3VtY2hlY2tzdW0';

export async function makeLab(db: Connection): Promise<void> {
  await db.insert(lab).values({ name: 'Test group', timeZone: 'Europe/Berlin' }).onConflictDoNothing();
}

/** A person who is signed in. */
export async function makePerson(
  db: Connection,
  given: {
    role?: PersonRole;
    admin?: boolean;
    active?: boolean;
    name?: string;
    login?: string;
    passwordHash?: string;
  } = {},
): Promise<Actor> {
  const n = next();
  const handle = given.login ?? `person${n}`;
  const values = {
    login: handle,
    email: `${handle}@lab.example`,
    name: given.name ?? `Person ${n}`,
    role: given.role ?? 'researcher',
    admin: given.admin ?? false,
    active: given.active ?? true,
    passwordHash: given.passwordHash ?? SOME_HASH,
  } as const;
  const [row] = await db.insert(person).values(values).returning({ id: person.id });
  if (!row) throw new Error('no person was made');
  const loginId = await makeLogin(db, row.id);
  const { login: name, role, admin, active } = values;
  return { personId: row.id, loginId, login: name, name: values.name, role, admin, active };
}

export async function makeLogin(db: Connection, personId: string): Promise<string> {
  const [row] = await db.insert(login).values({ personId }).returning({ id: login.id });
  if (!row) throw new Error('no login was made');
  return row.id;
}

export async function makeMember(
  db: Connection,
  notebookId: string,
  actor: Actor,
  role: MemberRole,
): Promise<void> {
  await db.insert(notebookMember).values({ notebookId, personId: actor.personId, role });
}

export async function makeNotebook(
  db: Connection,
  owner: Actor,
  given: { code?: string; title?: string; members?: [Actor, MemberRole][] } = {},
): Promise<{ id: string; code: string }> {
  const code = given.code ?? `T${next()}`;
  const [row] = await db
    .insert(notebook)
    .values({ code, title: given.title ?? `Notebook ${code}`, createdBy: owner.personId })
    .returning({ id: notebook.id });
  if (!row) throw new Error('no notebook was made');
  await makeMember(db, row.id, owner, 'owner');
  for (const [actor, role] of given.members ?? []) await makeMember(db, row.id, actor, role);
  return { id: row.id, code };
}

/** An entry without a document; use the product's own command where the body matters. */
export async function makeEntry(
  db: Database,
  notebookId: string,
  author: Actor,
  given: { title?: string; experimentDate?: string } = {},
): Promise<string> {
  const number = await db
    .update(notebook)
    .set({ lastNumber: sql`last_number + 1` })
    .where(sql`id = ${notebookId}`)
    .returning({ number: notebook.lastNumber });
  const id = randomUUID();
  // Only the columns that the role app may write; the others keep their defaults.
  await db.execute(sql`INSERT INTO entry (id, notebook_id, number, title, experiment_date, created_by)
    VALUES (${id}, ${notebookId}, ${number[0]?.number ?? 0}, ${given.title ?? 'A day'}, ${given.experimentDate ?? '2026-03-02'}, ${author.personId})`);
  return id;
}

export async function makeAttachment(
  db: Connection,
  entryId: string,
  actor: Actor,
  given: { name?: string; sha256?: string; bytes?: number; storageKey?: string } = {},
): Promise<string> {
  const [row] = await db
    .insert(attachment)
    .values({
      entryId,
      name: given.name ?? 'tracks.csv',
      mediaType: 'text/csv',
      bytes: given.bytes ?? 100,
      sha256: given.sha256 ?? 'a'.repeat(64),
      storageKey: given.storageKey ?? randomUUID(),
      personId: actor.personId,
    })
    .returning({ id: attachment.id });
  if (!row) throw new Error('no attachment was made');
  return row.id;
}
