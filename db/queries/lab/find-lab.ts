import { sql } from 'drizzle-orm';
import type { Connection } from '../../client';
import { lab } from '../../schema/index';

export interface Lab {
  readonly name: string;
  /** IANA name, e.g. "Europe/Oslo"; rules every displayed time. */
  readonly timeZone: string;
  /** The lab's calendar day at this moment, year-month-day. */
  readonly today: string;
}

/** The day in the lab's time zone by the database's clock, as SQL over the table `lab`. */
export const labDay = sql<string>`(motebook_now() at time zone ${lab.timeZone})::date::text`;

/** The group of this server; null on an installation that nobody has set up yet. */
export async function findLab(db: Connection): Promise<Lab | null> {
  const [row] = await db.select({ name: lab.name, timeZone: lab.timeZone, today: labDay }).from(lab);
  return row ?? null;
}
