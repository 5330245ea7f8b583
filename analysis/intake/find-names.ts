import { readNumber } from './number';
import { eachRow, type Row } from './rows';
import type { Dialect } from './types';
import { isUnit, withoutBrackets } from './units';

/** What is known of the rows of data when their names are looked for. */
export interface TableShape {
  readonly delimiter: Dialect['delimiter'];
  readonly decimal: Dialect['decimal'];
  /** Cells of most rows. */
  readonly width: number;
  /** The same without columns at the end that are empty in every row, as where each line ends with a delimiter. */
  readonly filled: number;
  /** Whether the first cells all differ, so that they may be names or numbers of the rows. */
  readonly rowNames: boolean;
}

export const countNumbers = (row: Row, decimal: '.' | ',') =>
  row.cells.reduce((count, cell) => count + (Number.isNaN(readNumber(cell, decimal)) ? 0 : 1), 0);

/** The row of names right above the first row of data, and a row of units between them. */
export function namesAbove(
  rows: readonly Row[],
  first: number,
  shape: TableShape,
): { header: Row | null; units: Row | null } {
  const above = asNames(rows[first - 1], shape);
  if (above === null) return { header: null, units: null };
  const names = isUnitsRow(above) ? asNames(rows[first - 2], shape) : null;
  return names ? { header: names, units: above } : { header: above, units: null };
}

/** Names in the comment right above the first row: "# t x y", cut as the data are or at blanks. */
export function commentedNames(
  lines: readonly string[],
  firstLine: number,
  shape: TableShape,
  comment: string | null,
): Row | null {
  const line = lines[firstLine - 2]?.trim();
  if (comment === null || !line?.startsWith(comment)) return null;
  let bare = line;
  while (bare.startsWith(comment)) bare = bare.slice(comment.length);
  for (const delimiter of [shape.delimiter, ' '] as const) {
    let cells: readonly string[] = [];
    eachRow(bare.trimStart(), { delimiter, comment: null }, { row: (row) => void ({ cells } = row) });
    const names = asNames({ line: firstLine - 1, cells }, { ...shape, delimiter });
    if (names) return names;
  }
  return null;
}

/** A row as the names of a table, one for each column; null when it is none. */
function asNames(row: Row | undefined, shape: TableShape): Row | null {
  if (!row) return null;
  const fitted = shape.delimiter === ' ' && row.cells.length !== shape.width ? withUnitsGlued(row) : row;
  const cells = inColumns(fitted.cells, shape);
  return cells && countNumbers(fitted, shape.decimal) === 0 ? { line: row.line, cells } : null;
}

/**
 * Cells of a row of words, placed over the columns. Empty cells at the end, of the names or of the data, move nothing. One
 * name fewer than there are columns means that the first column only names the rows (R, help of read.table: row.names).
 */
function inColumns(cells: readonly string[], { width, filled, rowNames }: TableShape) {
  if (cells.length === width) return cells;
  let named = cells.length;
  while (named > 0 && cells[named - 1] === '') named -= 1;
  if (named >= filled && named <= width) return cells.slice(0, named);
  return rowNames && named === filled - 1 && named >= 3 ? ['', ...cells.slice(0, named)] : null;
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
