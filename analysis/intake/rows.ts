import Papa from 'papaparse';
import { intakeFailure } from './failure';
import { MAX_COLUMNS, MAX_FIELD_CHARACTERS, MAX_LINE_CHARACTERS, MAX_PROBLEM_TEXT } from './limits';
import { takeOutQuoteFaults } from './quotes';
import type { Dialect, IntakeFailure } from './types';

/** One record of a file: its cells, trimmed, and the line where it begins (from 1). */
export interface Row {
  readonly line: number;
  readonly cells: readonly string[];
}

/** What may be done with a text cut into rows. `row` returns false to stop. */
export interface RowVisitor {
  /** @param text - the row's first line as it stands in the file; to be asked at once, before the next row. */
  row(row: Row, text: () => string): boolean | void;
  /** A line that could not be cut into cells. */
  fault?(line: number, reason: string, text: string): void;
}

/** A text whose line breaks are all \n (\r\n and lone \r are breaks too, as in an editor), or the line that is too long. */
export function withPlainBreaks(text: string): string | IntakeFailure {
  const plain = text.includes('\r') ? text.replaceAll('\r\n', '\n').replaceAll('\r', '\n') : text;
  let line = 1;
  for (let start = 0; start <= plain.length; line++) {
    const found = plain.indexOf('\n', start);
    const end = found < 0 ? plain.length : found;
    if (end - start > MAX_LINE_CHARACTERS) {
      return intakeFailure(
        'line-too-long',
        `Line ${line} has more than a million characters, so this is hardly a table. Check that the file has line breaks.`,
        line,
      );
    }
    start = end + 1;
  }
  return plain;
}

/**
 * Cuts a text into rows with papaparse (RFC 4180 quoting) and counts lines as an editor does, also where a quoted cell spans
 * several. Blank lines and comments are skipped; a comment is a line that begins with the mark, blanks before it allowed.
 * With the delimiter " ", any run of blanks and tabs parts two cells.
 * @param text - line breaks are \n.
 * @returns a failure that ended the reading, or null.
 */
export function eachRow(
  text: string,
  dialect: Pick<Dialect, 'delimiter' | 'comment'>,
  visitor: RowVisitor,
): IntakeFailure | null {
  const blanks = dialect.delimiter === ' ';
  const tabless = blanks ? text.replaceAll('\t', ' ') : text;
  const bare = dialect.comment === null ? tabless : emptyComments(tabless, dialect.comment);
  const quoted = bare.includes('"');
  const sound = quoted ? takeOutQuoteFaults(bare, dialect.delimiter) : { text: bare, faults: [] };
  const faults = sound.faults[Symbol.iterator]();
  let fault = faults.next();
  const tellFaults = (before: number) => {
    for (; !fault.done && fault.value.line < before; fault = faults.next())
      visitor.fault?.(fault.value.line, fault.value.reason, fault.value.text.slice(0, MAX_PROBLEM_TEXT));
  };
  let failure: IntakeFailure | null = null;
  let line = 1;
  let start = 0;
  let cursor = 0;
  // Made once: a closure for every row would cost more than the row.
  const show = () => {
    const end = sound.text.indexOf('\n', start);
    return sound.text.slice(start, Math.min(start + MAX_PROBLEM_TEXT, end < 0 ? sound.text.length : end));
  };
  Papa.parse<string[]>(sound.text, {
    delimiter: dialect.delimiter,
    newline: '\n',
    step({ data, meta }, parser) {
      const row = line;
      start = cursor;
      cursor = meta.cursor;
      line += quoted ? countBreaks(sound.text, start, cursor) : 1;
      if (!fault.done) tellFaults(row);
      const cells = trimmed(data, blanks);
      if (cells.length === 0) return;
      failure = tooLarge(cells, row);
      if (failure || visitor.row({ line: row, cells }, show) === false) parser.abort();
    },
  });
  if (!failure) tellFaults(Infinity);
  return failure;
}

/**
 * One line without quotation marks as a row, as `eachRow` would give it.
 * @returns null for a blank line and for a comment.
 */
export function asRow(
  text: string,
  dialect: Pick<Dialect, 'delimiter' | 'comment'>,
  line: number,
): Row | IntakeFailure | null {
  const blanks = dialect.delimiter === ' ';
  const tabless = blanks ? text.replaceAll('\t', ' ') : text;
  if (dialect.comment !== null && tabless.replace(/^[ \t]+/, '').startsWith(dialect.comment)) return null;
  const cells = trimmed(tabless.split(dialect.delimiter), blanks);
  if (cells.length === 0) return null;
  return tooLarge(cells, line) ?? { line, cells };
}

/** Number of line breaks between two places of a text. */
function countBreaks(text: string, from: number, to: number): number {
  let count = 0;
  for (let at = text.indexOf('\n', from); at >= 0 && at < to; at = text.indexOf('\n', at + 1)) count += 1;
  return count;
}

/** Leaves comment lines empty, so that a quotation mark in one means nothing and no line moves. */
function emptyComments(text: string, mark: string): string {
  if (!text.includes(mark)) return text;
  const kept: string[] = [];
  let keptUpTo = 0;
  for (let start = 0; start < text.length;) {
    const found = text.indexOf('\n', start);
    const end = found < 0 ? text.length : found;
    let first = start;
    while (first < end && (text[first] === ' ' || text[first] === '\t')) first += 1;
    if (text.startsWith(mark, first)) {
      kept.push(text.slice(keptUpTo, start));
      keptUpTo = end;
    }
    start = end + 1;
  }
  kept.push(text.slice(keptUpTo));
  return kept.join('');
}

/** Cells without blanks around them; empty when the row has nothing but blanks. */
function trimmed(data: string[], blanks: boolean): string[] {
  let filled = 0;
  for (let at = 0; at < data.length; at++) {
    const cell = data[at]!;
    // Most cells have nothing to trim, and to see that is quicker than to trim them.
    const plain = cell.length > 0 && isInk(cell.charCodeAt(0)) && isInk(cell.charCodeAt(cell.length - 1));
    if (!plain) data[at] = cell.trim();
    if (data[at] !== '') filled += 1;
  }
  if (filled === 0) return [];
  return blanks && filled < data.length ? data.filter((cell) => cell !== '') : data;
}

/** A visible ASCII character. */
const isInk = (code: number) => code > 32 && code < 127;

function tooLarge(cells: readonly string[], line: number): IntakeFailure | null {
  if (cells.length > MAX_COLUMNS) {
    return intakeFailure(
      'too-wide',
      `Line ${line} has ${cells.length} columns; at most ${MAX_COLUMNS} can be read. Export fewer columns, one row for each particle and frame.`,
      line,
    );
  }
  for (const cell of cells) {
    if (cell.length <= MAX_FIELD_CHARACTERS) continue;
    return intakeFailure(
      'line-too-long',
      `Line ${line} has a cell of more than ${MAX_FIELD_CHARACTERS} characters. Check that the delimiter is right.`,
      line,
    );
  }
  return null;
}
