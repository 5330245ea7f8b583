import { and, desc, eq, sql } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { GoToAnswer } from '../../inputs/search';
import type { Actor } from '../../policies/may';
import { mayReadNotebook } from '../../policies/notebook-filter';
import { entry, notebook, person } from '../../schema/index';

const ENTRIES = 7;
const OTHERS = 4;

/**
 * Where somebody may want to go who types a few letters: an entry by its number ("TRB 3", "3") or title, a notebook by code
 * or title, a person by name. Only what the actor may read, and only people who share a notebook with them.
 */
export async function goTo(db: Connection, actor: Actor, typed: string): Promise<GoToAnswer> {
  if (typed === '') return { entries: [], notebooks: [], people: [] };
  const part = `%${typed.toLowerCase().replaceAll(/[\\%_]/g, '\\$&')}%`;
  const numbered = /^\s*([a-z][a-z0-9]*)?\s*-?\s*(\d{1,9})\s*$/i.exec(typed);
  const code = numbered?.[1]?.toUpperCase() ?? null;
  const number = numbered ? Number(numbered[2]) : null;
  const byNumber =
    number === null
      ? sql`false`
      : sql`(${entry.number} = ${number} and (${code}::text is null or upper(${notebook.code}) = ${code}))`;
  const byTitle = sql`lower(${entry.title}) like ${part}`;
  const readable = mayReadNotebook(actor, notebook.id);
  const [entries, notebooks, people] = await Promise.all([
    db
      .select({
        id: entry.id,
        code: notebook.code,
        number: entry.number,
        title: entry.title,
        date: entry.experimentDate,
        state: entry.state,
      })
      .from(entry)
      .innerJoin(notebook, eq(notebook.id, entry.notebookId))
      .where(and(readable, sql`(${byNumber} or ${byTitle})`))
      .orderBy(...(number === null ? [] : [desc(byNumber)]), desc(entry.experimentDate), entry.id)
      .limit(ENTRIES),
    db
      .select({ id: notebook.id, code: notebook.code, title: notebook.title })
      .from(notebook)
      .where(
        and(readable, sql`(lower(${notebook.title}) like ${part} or lower(${notebook.code}) like ${part})`),
      )
      .orderBy(notebook.code)
      .limit(OTHERS),
    db
      .select({ id: person.id, name: person.name })
      .from(person)
      .where(
        sql`lower(${person.name}) like ${part} and exists (
          select 1 from notebook_member m where m.person_id = ${person.id} and ${mayReadNotebook(actor, sql`m.notebook_id`)})`,
      )
      .orderBy(person.name, person.id)
      .limit(OTHERS),
  ]);
  return { entries, notebooks, people };
}
