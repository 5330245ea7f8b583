import { sql } from 'drizzle-orm';
import { entry } from '../../schema/index';

/**
 * Printed names of an entry's authors, as SQL over the table `entry`: who started it, then whoever's edits reached it.
 * Taken from who wrote each update, not from a list that people keep by hand.
 */
export const entryPeople = sql<string[]>`array(
  select p.name from person p
  where p.id = ${entry.createdBy} or p.id in (
    select c.person_id from entry_client c where c.entry_id = ${entry.id} and exists (
      select 1 from entry_update u where u.entry_id = ${entry.id} and u.person_id = c.person_id))
  order by p.id <> ${entry.createdBy}, p.name, p.id)`;
