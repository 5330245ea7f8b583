import { existsSync, openSync, readFileSync, renameSync, statSync } from 'node:fs';

const LOG_BYTES = 5 * 1024 * 1024;

/** Opens a log for appending; a log that has grown large is set aside first (one older is kept). @returns its descriptor. */
export function openLog(file: string): number {
  if (existsSync(file) && statSync(file).size > LOG_BYTES) renameSync(file, `${file}.old`);
  return openSync(file, 'a', 0o600);
}

/** The last lines of a log, for a message about what went wrong. */
export function lastLines(file: string, count: number): string {
  return existsSync(file) ? readFileSync(file, 'utf8').trim().split('\n').slice(-count).join('\n') : '';
}
