import { setTimeout as pause } from 'node:timers/promises';
import { isDatabaseAway } from './is-database-away';

const FIRST_PAUSE_MS = 200;
const LONGEST_PAUSE_MS = 5_000;

/**
 * Runs what needs the database, and while that is away runs it again, with a growing pause. For the start of a process:
 * what was begun must be undone by `run` itself when it throws.
 * @param onAway - told once, at the first fault.
 * @throws whatever `run` throws that does not mean that the database is away.
 */
export async function whenReachable<T>(run: () => Promise<T>, onAway: (error: unknown) => void): Promise<T> {
  for (let tries = 0; ; tries++) {
    try {
      return await run();
    } catch (error) {
      if (!isDatabaseAway(error)) throw error;
      if (tries === 0) onAway(error);
    }
    await pause(Math.min(LONGEST_PAUSE_MS, FIRST_PAUSE_MS * 2 ** tries));
  }
}
