import type { Trouble } from '../../db/commands/projection/describe-blocks';
import { AppError } from '../../db/errors';

/** What a failed attempt means for whoever waits: what the block says, and whether it is tried again by itself. */
export interface Setback {
  readonly trouble: Trouble;
  readonly again: boolean;
}

const waiting = (message: string): Setback => ({ trouble: { status: 'waiting', message }, again: true });
const failed = (message: string, again = false): Setback => ({
  trouble: { status: 'failed', message },
  again,
});

/**
 * Sorts out why a result could not be computed. None of these is kept as a result: a result says what the data say, these
 * say what happened on this server. A question that was given up is asked again when a setting of the block changes.
 * @param attempts - how often it has been tried, from 1.
 */
export function troubleFor(error: unknown, attempts: number): Setback {
  if (error instanceof AppError) {
    if (error.code === 'slow-down')
      return waiting('Many results are being computed; this one waits its turn.');
    if (error.code === 'storage-down') {
      return waiting(
        'The file service cannot be reached at the moment. The file is safe there; the result is computed by itself once it answers.',
      );
    }
    if (error.cause === 'crash') {
      return attempts < 2
        ? waiting('The analysis ended unexpectedly and is tried once more.')
        : failed(
            'The analysis ended unexpectedly, twice. File and settings are safe. Change a setting to try again, and tell your administrator if it comes back.',
          );
    }
    // A file whose bytes are wrong can be put right by an administrator; too long and too large stay so.
    const ofThisQuestion = error.cause === 'time' || error.cause === 'memory';
    return failed(error.sentence, !ofThisQuestion);
  }
  if (error instanceof Error && error.message.startsWith('worker: ')) {
    return failed(
      'The analysis stopped with a fault of the program. File and settings are safe; please tell your administrator.',
    );
  }
  return waiting('');
}
