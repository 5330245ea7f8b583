import { sql } from 'drizzle-orm';
import { customType, timestamp } from 'drizzle-orm/pg-core';

/** Bytes, as a Buffer on both sides. */
export const bytea = customType<{ data: Buffer; driverData: Buffer }>({ dataType: () => 'bytea' });

/** A moment by the database's clock function, the only clock the record knows (never a client's, never Node's). */
export const momentByDatabase = (name: string) =>
  timestamp(name, { withTimezone: true, mode: 'date' })
    .notNull()
    .default(sql`motebook_now()`);

export const moment = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

/** A text cut into words for the full-text search. */
export const tsvector = customType<{ data: string }>({ dataType: () => 'tsvector' });
