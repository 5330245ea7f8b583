import { eq } from 'drizzle-orm';
import type { Connection } from '../../client';
import { person } from '../../schema/index';

/** Whether an account with this login name exists. Used to show the demo's accounts only where there are any. */
export async function hasPerson(db: Connection, login: string): Promise<boolean> {
  const found = await db.select({ id: person.id }).from(person).where(eq(person.login, login));
  return found.length > 0;
}
