import { sql } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { Actor } from '../../policies/may';
import { mayReadNotebook } from '../../policies/notebook-filter';
import { person } from '../../schema/index';

/** A person who shares a notebook with the actor; null for anybody else, as if there were no such person. */
export async function findColleague(
  db: Connection,
  actor: Actor,
  personId: string,
): Promise<{ id: string; name: string } | null> {
  const [row] = await db
    .select({ id: person.id, name: person.name })
    .from(person)
    .where(
      sql`${person.id} = ${personId}::uuid and exists (
        select 1 from notebook_member m where m.person_id = ${person.id} and ${mayReadNotebook(actor, sql`m.notebook_id`)})`,
    );
  return row ?? null;
}
