import { and, eq, sql, type SQL } from 'drizzle-orm';
import type { Connection } from '../../client';
import { may, type Actor, type MemberRole } from '../../policies/may';
import { mayReadNotebook } from '../../policies/notebook-filter';
import { lab, notebook, notebookMember } from '../../schema/index';

/** A notebook with the actor's place in it. */
export interface NotebookSummary {
  readonly id: string;
  readonly code: string;
  readonly title: string;
  readonly description: string;
  readonly archived: boolean;
  readonly role: MemberRole;
  readonly members: { readonly name: string; readonly role: MemberRole }[];
  readonly entryCount: number;
  /** Day of the newest entry, year-month-day; null while there is none. */
  readonly newestDate: string | null;
  /** The actor's draft for the lab's day, which "start today's entry" would open. */
  readonly todays: { readonly id: string; readonly number: number } | null;
  readonly may: { readonly startEntry: boolean };
}

/** The notebooks that the actor may read, the last one they wrote in first, archived ones at the end. */
export async function listNotebooks(db: Connection, actor: Actor): Promise<NotebookSummary[]> {
  return selectNotebooks(db, actor, undefined);
}

/** The rows behind `listNotebooks` and `getNotebook`: one rule for both. */
export async function selectNotebooks(
  db: Connection,
  actor: Actor,
  condition: SQL | undefined,
): Promise<NotebookSummary[]> {
  const rows = await db
    .select({
      id: notebook.id,
      code: notebook.code,
      title: notebook.title,
      description: notebook.description,
      archivedAt: notebook.archivedAt,
      role: notebookMember.role,
      members: sql<
        NotebookSummary['members']
      >`(select json_agg(json_build_object('name', p.name, 'role', m.role)
        order by m.role, p.name) from notebook_member m join person p on p.id = m.person_id where m.notebook_id = ${notebook.id})`,
      entryCount: sql<number>`(select count(*)::int from entry e where e.notebook_id = ${notebook.id})`,
      newestDate: sql<
        string | null
      >`(select max(e.experiment_date)::text from entry e where e.notebook_id = ${notebook.id})`,
      todays: sql<NotebookSummary['todays']>`(select json_build_object('id', e.id, 'number', e.number)
        from entry e join ${lab} on true
        where e.notebook_id = ${notebook.id} and e.created_by = ${actor.personId} and e.state = 'draft'
          and e.experiment_date = (motebook_now() at time zone ${lab.timeZone})::date
        order by e.number desc limit 1)`,
    })
    .from(notebook)
    .innerJoin(
      notebookMember,
      and(eq(notebookMember.notebookId, notebook.id), eq(notebookMember.personId, actor.personId)),
    )
    .where(and(mayReadNotebook(actor, notebook.id), condition))
    .orderBy(
      sql`${notebook.archivedAt} is not null`,
      sql`(select max(e.edited_at) from entry e where e.notebook_id = ${notebook.id} and e.created_by = ${actor.personId}) desc nulls last`,
      sql`(select max(e.edited_at) from entry e where e.notebook_id = ${notebook.id}) desc nulls last`,
      notebook.code,
    );
  return rows.map(({ archivedAt, ...row }) => {
    const archived = archivedAt !== null;
    return {
      ...row,
      archived,
      may: { startEntry: may(actor, 'entry.create', { member: row.role, archived }) },
    };
  });
}
