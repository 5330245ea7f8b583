import { applyStated, type Stated } from './apply-stated';
import { inspectFile } from './inspect-file';
import { readTrajectories, type ReadOutcome } from './read-trajectories';
import { stillRequired } from './required';
import type { Inspection, IntakeFailure, ReadingSpec } from './types';

export interface TakenIn {
  readonly inspection: Inspection | IntakeFailure;
  /** null while something required is missing. */
  readonly read: ReadOutcome | IntakeFailure | null;
}

/**
 * Intake as a whole, the one way that the server and the command go: understand a file, put what was stated on top, and read
 * it when nothing is missing.
 * @param spec - a whole reading that a person has settled; replaces the guess and what was stated.
 */
export function takeIn(
  bytes: Uint8Array,
  name: string,
  stated: Stated,
  spec: ReadingSpec | null = null,
): TakenIn {
  const inspected = inspectFile(bytes, name);
  if (inspected.failed) return { inspection: inspected, read: null };
  const guessed = applyStated(inspected, stated);
  const inspection: Inspection = spec ? { ...guessed, spec, required: stillRequired(spec) } : guessed;
  const read = inspection.required.length > 0 ? null : readTrajectories(bytes, inspection.spec);
  return { inspection, read };
}
