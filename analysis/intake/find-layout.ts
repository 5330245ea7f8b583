import { intakeFailure } from './failure';
import { HEAD_CHARACTERS } from './limits';
import { readNumber, saysNoValue } from './number';
import { eachRow, type Row } from './rows';
import type { Dialect, IntakeFailure } from './types';
import { isUnit, withoutBrackets } from './units';

/** Where the table is in a file: how it is cut, and which lines are names, units and data. */
export interface Layout {
  readonly delimiter: Dialect['delimiter'];
  readonly decimal: Dialect['decimal'];
  readonly comment: string | null;
  readonly header: Row | null;
  readonly units: Row | null;
  /** Rows from the first one of data on, as far as the file was looked at. At least one. */
  readonly data: readonly Row[];
}

const DELIMITERS: readonly Dialect['delimiter'][] = [',', ';', '\t', '|', ' '];
const COMMENTS = ['#', '%', '//'] as const;

/**
 * Finds delimiter and decimal mark by trying them all on the first 64 KiB: the right ones give the most numbers in rows of
 * equal width. Then the table's first row, and above it the units and the names.
 * @param text - line breaks are \n.
 */
export function findLayout(text: string): Layout | IntakeFailure {
  const other = otherFormat(text);
  if (other) return noTable(other);
  const head = headOf(text);
  const lines = head.split('\n');
  const comment = COMMENTS.find((mark) => lines.some((line) => line.trimStart().startsWith(mark))) ?? null;
  let best: { score: number; layout: Layout } | null = null;
  let failure: IntakeFailure | null = null;
  for (const delimiter of DELIMITERS) {
    const rows: Row[] = [];
    const failed = eachRow(head, { delimiter, comment }, { row: (row) => void rows.push(row) });
    if (failed) {
      failure ??= failed;
      continue;
    }
    for (const decimal of ['.', ','] as const) {
      // A comma cannot part cells and digits at once: "1,234" in quotation marks may mean a thousand.
      if (decimal === delimiter) continue;
      const found = tableIn(rows, decimal, delimiter);
      if (!found || (best && found.score <= best.score)) continue;
      const header = found.header ?? commentedHeader(lines, found.data[0]!, { delimiter, comment });
      best = { score: found.score, layout: { delimiter, decimal, comment, ...found, header } };
    }
  }
  if (best) return best.layout;
  return failure ?? noTable('text without a table of numbers');
}

/** The start of the text, cut at a line's end. */
function headOf(text: string): string {
  if (text.length <= HEAD_CHARACTERS) return text;
  const cut = text.lastIndexOf('\n', HEAD_CHARACTERS);
  return text.slice(0, cut > 0 ? cut : HEAD_CHARACTERS);
}

const countNumbers = (row: Row, decimal: '.' | ',') =>
  row.cells.reduce((count, cell) => count + (Number.isNaN(readNumber(cell, decimal)) ? 0 : 1), 0);

/** A row of data has at least two numbers, and they are at least a third of its filled cells. */
function isData(row: Row, decimal: '.' | ','): boolean {
  const numbers = countNumbers(row, decimal);
  return numbers >= 2 && numbers * 3 >= row.cells.filter((cell) => cell !== '').length;
}

function tableIn(rows: readonly Row[], decimal: '.' | ',', delimiter: string) {
  const good = rows.map((row) => isData(row, decimal));
  const width = commonWidth(rows.filter((_, i) => good[i]));
  let first = rows.findIndex((row, i) => good[i] && row.cells.length === width);
  if (first < 0) return null;
  // Rows above that belong to the table although too many of their cells are empty or unreadable.
  const belongs = (row: Row | undefined) =>
    row?.cells.length === width && (countNumbers(row, decimal) > 0 || row.cells.every(saysNoValue));
  while (belongs(rows[first - 1])) first -= 1;
  const data = rows.slice(first);
  let score = 0;
  let fitting = 0;
  for (const row of data) {
    const filled = row.cells.filter((cell) => cell !== '').length;
    const fits = row.cells.length === width && isData(row, decimal);
    score += fits ? 3 * countNumbers(row, decimal) - filled : -2;
    if (fits) fitting += 1;
  }
  const names = namesAbove(rows, first, { width, decimal, blanks: delimiter === ' ' });
  // Prose has numbers too, but not in most of its lines; a single row needs names above it to be a table.
  if (fitting * 2 < data.length || (fitting < 2 && names.header === null)) return null;
  return { score: names.header ? score + 1 : score, ...names, data };
}

/** The most frequent width; among equals the larger. */
function commonWidth(rows: readonly Row[]): number {
  const counts = new Map<number, number>();
  for (const { cells } of rows) counts.set(cells.length, (counts.get(cells.length) ?? 0) + 1);
  let best = 0;
  for (const [width, count] of counts) {
    const most = counts.get(best) ?? 0;
    if (count > most || (count === most && width > best)) best = width;
  }
  return best;
}

function namesAbove(
  rows: readonly Row[],
  first: number,
  table: { width: number; decimal: '.' | ','; blanks: boolean },
): { header: Row | null; units: Row | null } {
  const wordsAt = (at: number): Row | null => {
    const row = rows[at];
    if (!row) return null;
    const fitted = table.blanks && row.cells.length !== table.width ? withUnitsGlued(row) : row;
    return fitted.cells.length === table.width && countNumbers(fitted, table.decimal) === 0 ? fitted : null;
  };
  const above = wordsAt(first - 1);
  if (above === null) return { header: null, units: null };
  const names = isUnitsRow(above) ? wordsAt(first - 2) : null;
  return names ? { header: names, units: above } : { header: above, units: null };
}

/** "time (s) x (µm)" cut at blanks is two columns, not four. */
function withUnitsGlued(row: Row): Row {
  const cells: string[] = [];
  for (const cell of row.cells) {
    const last = cells.length - 1;
    if (last >= 0 && withoutBrackets(cell) !== cell) cells[last] += ` ${cell}`;
    else cells.push(cell);
  }
  return { ...row, cells };
}

/** Cells such as "s", "(µm)", "[px]", "-" or nothing, with at least one real unit among them. */
function isUnitsRow(row: Row): boolean {
  const bare = row.cells.map(withoutBrackets);
  return (
    bare.some(isUnit) && bare.every((cell, i) => isNoUnit(cell) || isUnit(cell) || cell !== row.cells[i])
  );
}

/** What stands in a row of units below a column that has none. */
export const isNoUnit = (cell: string): boolean =>
  ['', '-', '–', '1', '#', 'none'].includes(cell.toLowerCase());

/** Names in the comment right above the first row: "# t x y". */
function commentedHeader(
  lines: readonly string[],
  first: Row,
  dialect: Pick<Dialect, 'delimiter' | 'comment'>,
): Row | null {
  const line = lines[first.line - 2]?.trim();
  if (dialect.comment === null || !line?.startsWith(dialect.comment)) return null;
  let bare = line;
  while (bare.startsWith(dialect.comment)) bare = bare.slice(dialect.comment.length);
  let names: Row | null = null;
  eachRow(bare.trimStart(), { ...dialect, comment: null }, { row: (row) => void (names = row) });
  if (names === null) return null;
  const row: Row = { line: first.line - 1, cells: (names as Row).cells };
  const fitted =
    dialect.delimiter === ' ' && row.cells.length !== first.cells.length ? withUnitsGlued(row) : row;
  return fitted.cells.length === first.cells.length && countNumbers(fitted, '.') === 0 ? fitted : null;
}

/** Well-known kinds of text that hold no table of cells. */
function otherFormat(text: string): string | null {
  const start = text.slice(0, 4096).trimStart();
  const end = text.slice(-4096).trimEnd();
  if (start.startsWith('<')) return 'a web page or an XML file';
  const braces = (start.startsWith('{') && end.endsWith('}')) || (start.startsWith('[') && end.endsWith(']'));
  if (braces) return 'a JSON file';
  return text.trim() === '' ? 'an empty page: there are only blanks and line breaks' : null;
}

function noTable(is: string): IntakeFailure {
  return intakeFailure(
    'no-columns',
    `This looks like ${is}. A trajectory file is a table with one row for each particle and frame: time or frame, x, y, and which track it belongs to. Export the tracks as CSV.`,
  );
}
