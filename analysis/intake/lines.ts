import Papa from 'papaparse';
import type { Dialect, IntakeFailure } from './types';
import { MAX_COLUMNS, MAX_FIELD_CHARACTERS, MAX_LINE_CHARACTERS } from './limits';

/** One record of a file: its cells, trimmed, and the line where it begins (from 1). */
export interface Row {
  readonly line: number;
  readonly cells: readonly string[];
}

const fail = (code: IntakeFailure['code'], message: string, line: number | null): IntakeFailure => ({
  failed: true,
  code,
  message,
  line,
});

/**
 * Cuts a text into rows with papaparse (RFC 4180 quoting) and counts lines as an editor does, also where a quoted cell
 * spans several. Blank lines and comments are skipped.
 */
export function rowsOf(
  text: string,
  dialect: Pick<Dialect, 'delimiter' | 'comment'>,
  limit = Infinity,
): Row[] | IntakeFailure {
  const long = longLine(text);
  if (long !== null) {
    return fail(
      'line-too-long',
      `Line ${long} has more than a million characters, so this is hardly a table. Check that the file has line breaks.`,
      long,
    );
  }
  const rows: Row[] = [];
  let failure: IntakeFailure | null = null;
  let line = 1;
  let cursor = 0;
  const newline = text.includes('\n') ? undefined : text.includes('\r') ? '\r' : undefined;
  Papa.parse<string[]>(text, {
    delimiter: dialect.delimiter,
    newline,
    header: false,
    dynamicTyping: false,
    skipEmptyLines: false,
    step(result, parser) {
      const start = line;
      const end = result.meta.cursor;
      line += countLines(text, cursor, end);
      cursor = end;
      const cells = result.data.map((cell) => cell.trim());
      const row = dialect.delimiter === ' ' ? cells.filter((cell) => cell !== '') : cells;
      if (row.every((cell) => cell === '')) return;
      if (dialect.comment !== null && row[0]!.startsWith(dialect.comment)) return;
      if (row.length > MAX_COLUMNS)
        failure = fail(
          'too-wide',
          `Line ${start} has ${row.length} columns; at most ${MAX_COLUMNS} can be read.`,
          start,
        );
      if (row.some((cell) => cell.length > MAX_FIELD_CHARACTERS)) {
        failure = fail(
          'line-too-long',
          `Line ${start} has a cell of more than ${MAX_FIELD_CHARACTERS} characters. Is a quotation mark missing?`,
          start,
        );
      }
      if (failure || rows.length >= limit) {
        parser.abort();
        return;
      }
      rows.push({ line: start, cells: row });
    },
  });
  return failure ?? rows;
}

/** Line breaks (\n, \r\n or lone \r) between two places of a text. */
function countLines(text: string, from: number, to: number): number {
  let count = 0;
  for (let at = from; at < to; at++) {
    const code = text.charCodeAt(at);
    if (code === 10) count += 1;
    else if (code === 13 && text.charCodeAt(at + 1) !== 10) count += 1;
  }
  return count;
}

function longLine(text: string): number | null {
  let start = 0;
  let line = 1;
  for (let at = 0; at <= text.length; at++) {
    const code = at === text.length ? 10 : text.charCodeAt(at);
    if (code !== 10 && code !== 13) continue;
    if (at - start > MAX_LINE_CHARACTERS) return line;
    start = at + 1;
    if (code === 10 || text.charCodeAt(at + 1) !== 10) line += 1;
  }
  return null;
}
