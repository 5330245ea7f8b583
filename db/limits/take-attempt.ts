import { createHash } from 'node:crypto';
import { and, eq, sql } from 'drizzle-orm';
import type { Connection } from '../client';
import { AppError } from '../errors';
import { attempt } from '../schema/index';
import { LIMITS, type LimitKind } from './limits';

/** Something that is limited, and for whom or for where. */
export interface Limited {
  readonly kind: LimitKind;
  /** A name or a network address, in the form in which equal ones are equal. */
  readonly key: string;
}

const hashed = (key: string) => createHash('sha256').update(key).digest();

/**
 * Counts one attempt of each kind, before it is made, so that many at once cannot slip through together. One statement a
 * row: processes that count at the same moment wait for each other.
 * @throws SlowDown - one of them is above its limit.
 */
export async function takeAttempts(db: Connection, limited: readonly Limited[]): Promise<void> {
  let longest = 0;
  let stopped: LimitKind | null = null;
  for (const { kind, key } of limited) {
    const { most, seconds } = LIMITS[kind];
    const isOver = sql`${attempt.startedAt} <= motebook_now() - make_interval(secs => ${seconds})`;
    const [row] = await db
      .insert(attempt)
      .values({ kind, key: hashed(key), count: 1 })
      .onConflictDoUpdate({
        target: [attempt.kind, attempt.key],
        set: {
          startedAt: sql`CASE WHEN ${isOver} THEN motebook_now() ELSE ${attempt.startedAt} END`,
          count: sql`CASE WHEN ${isOver} THEN 1 ELSE least(${attempt.count} + 1, 1000000) END`,
        },
      })
      .returning({
        count: attempt.count,
        wait: sql<number>`ceil(extract(epoch FROM ${attempt.startedAt} - motebook_now()) + ${seconds}::float8)::int`,
      });
    if (row && row.count > most && row.wait > longest) {
      longest = row.wait;
      stopped = kind;
    }
  }
  if (stopped) throw new SlowDown(longest, stopped);
}

/** Takes back attempts that turned out to be right: the count of failures starts anew. */
export async function forgetAttempts(db: Connection, limited: readonly Limited[]): Promise<void> {
  for (const { kind, key } of limited)
    await db.delete(attempt).where(and(eq(attempt.kind, kind), eq(attempt.key, hashed(key))));
}

/** Gives one attempt back, where those of others are counted in the same row. */
export async function returnAttempt(db: Connection, { kind, key }: Limited): Promise<void> {
  await db
    .update(attempt)
    .set({ count: sql`greatest(${attempt.count} - 1, 0)` })
    .where(and(eq(attempt.kind, kind), eq(attempt.key, hashed(key))));
}

/** Too many attempts. `seconds`: after how long the next may succeed, for Retry-After. */
export class SlowDown extends AppError {
  constructor(
    readonly seconds: number,
    readonly kind: LimitKind,
  ) {
    super('slow-down', { message: `${kind} is above its limit`, sentence: sentence(seconds, kind) });
  }
}

function sentence(seconds: number, kind: LimitKind): string {
  if (kind === 'sign-in.row') {
    return 'There were too many wrong passwords for this name. Set a new one: choose "Forgotten your password?".';
  }
  const minutes = Math.ceil(seconds / 60);
  const wait = seconds < 60 ? `${seconds} seconds` : minutes === 1 ? 'one minute' : `${minutes} minutes`;
  return `Too many attempts. Wait ${wait} and try again.`;
}
