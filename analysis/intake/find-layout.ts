import { intakeFailure } from './failure';
import { commentedNames, countNumbers, namesAbove, type TableShape } from './find-names';
import { HEAD_CHARACTERS } from './limits';
import { readNumber, saysNoValue } from './number';
import { eachRow, type Row } from './rows';
import type { Dialect, IntakeFailure } from './types';

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
      const header = found.header ?? commentedNames(lines, found.data[0]!.line, found.shape, comment);
      const { units, data } = found;
      best = { score: found.score, layout: { delimiter, decimal, comment, header, units, data } };
    }
  }
  if (best) return best.layout;
  return failure ?? noTable(otherText(lines, comment));
}

/** The start of the text, cut at a line's end. */
function headOf(text: string): string {
  if (text.length <= HEAD_CHARACTERS) return text;
  const cut = text.lastIndexOf('\n', HEAD_CHARACTERS);
  return text.slice(0, cut > 0 ? cut : HEAD_CHARACTERS);
}

/** A row of data has at least two numbers, and they are at least a third of its filled cells. */
function isData(row: Row, decimal: '.' | ','): boolean {
  const numbers = countNumbers(row, decimal);
  return numbers >= 2 && numbers * 3 >= row.cells.filter((cell) => cell !== '').length;
}

function tableIn(rows: readonly Row[], decimal: '.' | ',', delimiter: Dialect['delimiter']) {
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
  const shape = shapeOf(data, { width, decimal, delimiter });
  let names = namesAbove(rows, first, shape);
  if (names.header === null) {
    // Rows of another width may stand between the names and the first row that is sound; the reading lists them.
    let top = first;
    while (good[top - 1]) top -= 1;
    names = namesAbove(rows, top, shape);
  }
  // Prose has numbers too, but not in most of its lines; a single row needs names above it to be a table.
  if (fitting * 2 < data.length || (fitting < 2 && names.header === null)) return null;
  return { score: names.header ? score + 1 : score, ...names, data, shape };
}

/** What the rows of data say about the row of names that belongs to them. */
function shapeOf(
  data: readonly Row[],
  table: Pick<TableShape, 'width' | 'decimal' | 'delimiter'>,
): TableShape {
  const rows = data.filter(({ cells }) => cells.length === table.width);
  let filled = table.width;
  while (filled > 1 && rows.every(({ cells }) => cells[filled - 1] === '')) filled -= 1;
  const firsts = new Set(rows.map(({ cells }) => cells[0]));
  return { ...table, filled, rowNames: rows.length > 2 && !firsts.has('') && firsts.size === rows.length };
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

/** Well-known kinds of text that hold no table of cells. */
function otherFormat(text: string): string | null {
  const start = text.slice(0, 4096).trimStart();
  const end = text.slice(-4096).trimEnd();
  if (start.startsWith('<')) return 'a web page or an XML file';
  const braces = (start.startsWith('{') && end.endsWith('}')) || (start.startsWith('[') && end.endsWith(']'));
  if (braces) return 'a JSON file';
  return text.trim() === '' ? 'an empty page: there are only blanks and line breaks' : null;
}

/** What a text is that has rows, but no table of positions. */
function otherText(lines: readonly string[], comment: string | null): string {
  const rows = lines
    .map((line) => line.trim())
    .filter((line) => line !== '' && (comment === null || !line.startsWith(comment)));
  if (rows.length === 1 && DELIMITERS.some((mark) => mark !== ' ' && rows[0]!.includes(mark)))
    return 'a line of names without rows of numbers below it';
  const isNumber = (row: string) =>
    !(Number.isNaN(readNumber(row, '.')) && Number.isNaN(readNumber(row, ',')));
  const numbers = rows.filter(isNumber).length;
  return numbers > 0 && numbers >= rows.length - 1
    ? 'a single column of numbers'
    : 'text without a table of numbers';
}

function noTable(is: string): IntakeFailure {
  return intakeFailure(
    'no-columns',
    `This looks like ${is}. A trajectory file is a table with one row for each particle and frame: time or frame, x, y, and which track it belongs to. Export the tracks as CSV.`,
  );
}
