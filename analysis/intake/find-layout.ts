import { readNumber } from './number';
import { rowsOf, type Row } from './lines';
import { isUnit } from './units';
import type { Dialect, IntakeFailure } from './types';

/** Where the table is in a file: how it is cut, and which lines are names, units and data. */
export interface Layout {
  readonly delimiter: Dialect['delimiter'];
  readonly decimal: Dialect['decimal'];
  readonly comment: string | null;
  readonly header: Row | null;
  readonly units: Row | null;
  readonly data: readonly Row[];
}

const DELIMITERS: readonly Dialect['delimiter'][] = [',', ';', '\t', '|', ' '];
const COMMENTS = ['#', '%', '//'] as const;
/** So much of a file is looked at to understand it. */
const HEAD_CHARACTERS = 64 * 1024;

/**
 * Finds delimiter and decimal mark by trying them all on the first 64 KiB: the right ones give the most numbers in rows of
 * equal width. Then the table's first row, and above it the units and the names.
 */
export function findLayout(text: string): Layout | IntakeFailure {
  const head = headOf(text);
  const comment = COMMENTS.find((mark) => head.startsWith(mark) || head.includes(`\n${mark}`)) ?? null;
  let best: { score: number; layout: Layout } | null = null;
  let failure: IntakeFailure | null = null;
  for (const delimiter of DELIMITERS) {
    const rows = rowsOf(head, { delimiter, comment });
    if ('failed' in rows) {
      failure ??= rows;
      continue;
    }
    for (const decimal of ['.', ','] as const) {
      if (decimal === delimiter) continue;
      const found = tableIn(rows, decimal);
      if (found && (!best || found.score > best.score)) {
        best = { score: found.score, layout: { delimiter, decimal, comment, ...found.table } };
      }
    }
  }
  if (best) return best.layout;
  return failure ?? noTable(text);
}

/** The start of the text, cut at a line's end. */
function headOf(text: string): string {
  if (text.length <= HEAD_CHARACTERS) return text;
  const cut = Math.max(text.lastIndexOf('\n', HEAD_CHARACTERS), text.lastIndexOf('\r', HEAD_CHARACTERS));
  return text.slice(0, cut > 0 ? cut : HEAD_CHARACTERS);
}

const countNumbers = (row: Row, decimal: '.' | ',') =>
  row.cells.reduce((count, cell) => count + (Number.isNaN(readNumber(cell, decimal)) ? 0 : 1), 0);

/** A row of data has at least two numbers, and they are at least half of its filled cells. */
function isData(row: Row, decimal: '.' | ','): boolean {
  const numbers = countNumbers(row, decimal);
  return numbers >= 2 && numbers * 2 >= row.cells.filter((cell) => cell !== '').length;
}

function tableIn(rows: readonly Row[], decimal: '.' | ',') {
  const first = rows.findIndex(
    (row, i) => isData(row, decimal) && (rows[i + 1] === undefined || sameTable(row, rows[i + 1]!, decimal)),
  );
  if (first < 0) return null;
  const width = rows[first]!.cells.length;
  const data = rows.slice(first);
  let score = 0;
  for (const row of data) {
    const numbers = countNumbers(row, decimal);
    const filled = row.cells.filter((cell) => cell !== '').length;
    if (row.cells.length === width) score += 2 * numbers - filled;
    else score -= 2;
  }
  const above = rows[first - 1];
  const unitsAbove = above && above.cells.length === width && isUnitsRow(above) ? above : null;
  const candidate = unitsAbove ? rows[first - 2] : above;
  const header =
    candidate && candidate.cells.length === width && countNumbers(candidate, decimal) * 2 < width
      ? candidate
      : null;
  return { score, table: { header, units: header ? unitsAbove : null, data } };
}

const sameTable = (a: Row, b: Row, decimal: '.' | ',') =>
  a.cells.length === b.cells.length || isData(b, decimal);

/** Cells such as "s", "(µm)", "[px]", "-" or nothing, with at least one real unit among them. */
function isUnitsRow(row: Row): boolean {
  const bare = row.cells.map((cell) =>
    (cell.startsWith('(') && cell.endsWith(')')) || (cell.startsWith('[') && cell.endsWith(']'))
      ? cell.slice(1, -1)
      : cell,
  );
  return (
    bare.some(isUnit) && bare.every((cell) => cell === '' || cell === '-' || cell === '1' || isUnit(cell))
  );
}

/** Says what a text without a table seems to be. */
function noTable(text: string): IntakeFailure {
  const start = text.trimStart().slice(0, 200).toLowerCase();
  const is = start.startsWith('<')
    ? 'a web page or an XML file'
    : start.startsWith('{') || start.startsWith('[')
      ? 'a JSON file'
      : 'text without a table of numbers';
  return {
    failed: true,
    code: 'no-columns',
    message: `This looks like ${is}. A trajectory file is a table with one row for each particle and frame: time or frame, x, y, and which track it belongs to. Export the tracks as CSV.`,
    line: null,
  };
}
