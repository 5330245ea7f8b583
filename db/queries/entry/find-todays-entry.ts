import { and, desc, eq, sql } from 'drizzle-orm';
import type { Connection } from '../../client';
import type { Actor } from '../../policies/may';
import { entry, lab } from '../../schema/index';

/**
 * The actor's own draft for the lab's day in a notebook, the newest if there are several; null without one. Asked by
 * "start today's entry", which opens it instead of making a second. (A draft that the actor started in a notebook they
 * have left is found too; whether they may open it is for the page to ask.)
 */
export async function findTodaysEntry(
  db: Connection,
  actor: Actor,
  notebookId: string,
): Promise<{ id: string; number: number } | null> {
  const [row] = await db
    .select({ id: entry.id, number: entry.number })
    .from(entry)
    .innerJoin(lab, eq(entry.experimentDate, sql`(motebook_now() at time zone ${lab.timeZone})::date`))
    .where(
      and(eq(entry.notebookId, notebookId), eq(entry.createdBy, actor.personId), eq(entry.state, 'draft')),
    )
    .orderBy(desc(entry.number))
    .limit(1);
  return row ?? null;
}
