import { readFileSync } from 'node:fs';
import { applyStated, type Stated } from '../../../analysis/intake/apply-stated';
import { inspectFile } from '../../../analysis/intake/inspect-file';
import { readTrajectories, type ReadOutcome } from '../../../analysis/intake/read-trajectories';
import type { Inspection, IntakeFailure, ReadingSpec } from '../../../analysis/intake/types';

export const bytesOf = (text: string): Uint8Array => new TextEncoder().encode(text);
export const golden = (name: string): Uint8Array =>
  new Uint8Array(readFileSync(new URL(`../../fixtures/golden/${name}`, import.meta.url)));

/** Text in UTF-16 with its byte-order mark. */
export function utf16(text: string, order: 'le' | 'be'): Uint8Array {
  const bytes = new Uint8Array(2 * text.length + 2);
  const view = new DataView(bytes.buffer);
  [0xfeff, ...Array.from({ length: text.length }, (_, at) => text.charCodeAt(at))].forEach((code, at) =>
    view.setUint16(2 * at, code, order === 'le'),
  );
  return bytes;
}

/** What is understood of a file that is known to be understandable. */
export function inspect(file: string | Uint8Array, name = 'tracks.csv'): Inspection {
  const inspection = inspectFile(typeof file === 'string' ? bytesOf(file) : file, name);
  if (inspection.failed) throw new Error(`refused: ${inspection.message}`);
  return inspection;
}

export function refusal(file: string | Uint8Array): IntakeFailure {
  const inspection = inspectFile(typeof file === 'string' ? bytesOf(file) : file, 'tracks.csv');
  if (!inspection.failed) throw new Error(`not refused, but read as ${JSON.stringify(inspection.spec)}`);
  return inspection;
}

/** Reads a file with what was guessed, what is stated, and then what `change` corrects. */
export function tryRead(
  file: string | Uint8Array,
  stated: Stated = {},
  change: (spec: ReadingSpec) => ReadingSpec = (spec) => spec,
): ReadOutcome | IntakeFailure {
  const bytes = typeof file === 'string' ? bytesOf(file) : file;
  return readTrajectories(bytes, change(applyStated(inspect(bytes), stated).spec));
}

export function read(...args: Parameters<typeof tryRead>): ReadOutcome {
  const outcome = tryRead(...args);
  if (outcome.failed) throw new Error(`refused: ${outcome.message}`);
  return outcome;
}

/** The values that were read, as plain lists. */
export function values(outcome: ReadOutcome) {
  const { trackIds, track, time, frame, axes } = outcome.trajectories;
  return {
    tracks: Array.from(track, (at) => trackIds[at]),
    time: time && [...time],
    frame: frame && [...frame],
    axes: axes.map((axis) => [...axis]),
  };
}
