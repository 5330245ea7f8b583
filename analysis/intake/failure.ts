import type { IntakeFailure } from './types';

/** A file that cannot be read: what it seems to be and what to do, with the line where that is known. */
export function intakeFailure(
  code: IntakeFailure['code'],
  message: string,
  line: number | null = null,
): IntakeFailure {
  return { failed: true, code, message, line };
}
