import { intakeFailure } from './failure';
import type { Layout } from './find-layout';
import { readNumber, saysNoValue } from './number';
import { rolesByName, type NamedColumn, type NamedRoles } from './roles-by-name';
import { findClock, isNumeric, rolesByPlace } from './roles-by-place';
import type { ColumnRoles, Inspection, IntakeFailure } from './types';

/** So many rows are looked at to guess what a column is. */
const LOOKED_AT_ROWS = 500;

/**
 * The part each column plays: by name where there are names that are understood, else by what stands in the columns.
 * @param notes - sentences for the person are added: what was assumed and why.
 */
export function findRoles(
  layout: Layout,
  columns: Inspection['columns'],
  notes: string[],
): ColumnRoles | IntakeFailure {
  const cells = layout.data.slice(0, LOOKED_AT_ROWS).map((row) => row.cells);
  const numbers = cells.map((row) => row.map((cell) => readNumber(cell, layout.decimal)));
  const named: NamedColumn[] = columns.map((column, at) => ({
    ...column,
    numeric: isNumeric(numbers, at),
    positions: countPositions(cells, numbers, at),
  }));
  let roles = rolesByName(named);
  const meant = rolesByName(named.map((column) => ({ ...column, numeric: true, positions: cells.length })));
  if (roles.x === null) {
    // A column that is called x and holds words is no reason to take another one for it.
    if (meant.x !== null) return noNumbers(meant.x, columns, cells, layout);
    // Names that mean nothing here, or none at all; a clock or track that was named is not guessed anew.
    const placed = rolesByPlace(cells, numbers);
    const known = roles.time ?? roles.frame ?? roles.track;
    if (placed.x === null || (known !== null && !Object.values(placed).includes(known)))
      return noPositions(layout, columns, roles);
    roles = placed;
    notes.push(
      layout.header
        ? 'The column names were not understood; the columns were guessed by what stands in them. Check them.'
        : 'The file has no column names; the columns were guessed by what stands in them. Check them.',
    );
  }
  if (roles.time === null && roles.frame === null) {
    const used = new Set(Object.values(roles));
    const left = columns.map((_, at) => at).filter((at) => !used.has(at) && named[at]!.numeric);
    const clock = findClock(cells, numbers, left, roles.track);
    if (clock === null) {
      const called = meant.time ?? meant.frame;
      return called === null
        ? noPositions(layout, columns, roles)
        : noNumbers(called, columns, cells, layout);
    }
    roles = { ...roles, [clock.role]: clock.column };
    notes.push(
      `No column is named time or frame; "${columns[clock.column]!.name}" rises row by row and was taken as the ${clock.role}. Check it.`,
    );
  }
  if (roles.time !== null && roles.frame !== null) {
    notes.push('The file has both times and frame numbers; the times were used.');
    roles.frame = null;
  }
  if (roles.track !== null && isRowNumber(roles.track, cells, columns)) roles.track = null;
  addTrackNotes(roles, cells, notes);
  if (layout.header?.cells[0] === '' && !Object.values(roles).includes(0))
    notes.push('The first column has no name; it was taken to number the rows and was not used.');
  return { ...roles, x: roles.x! };
}

/** A column "id" in which nothing ever repeats numbers the rows, not the particles. */
function isRowNumber(
  track: number,
  cells: readonly (readonly string[])[],
  columns: Inspection['columns'],
): boolean {
  const ids = new Set(cells.map((row) => row[track] ?? ''));
  return columns[track]!.name.toLowerCase() === 'id' && cells.length >= 20 && ids.size === cells.length;
}

function addTrackNotes(
  roles: { track: number | null; time: number | null; frame: number | null },
  cells: readonly (readonly string[])[],
  notes: string[],
): void {
  if (roles.track !== null) return;
  const clock = (roles.time ?? roles.frame)!;
  const moments = new Set(cells.map((row) => row[clock] ?? ''));
  notes.push(
    moments.size < cells.length
      ? 'There is no track column, so all rows were taken as one track; but several rows have the same time. If they are different particles, add a track column.'
      : 'There is no track column, so all rows were taken as one track.',
  );
}

/**
 * How many positions a column holds; 0 when it holds something else. Frames in which a particle was not seen may be most of
 * its rows, so cells that say that there is no value do not count against it.
 */
function countPositions(
  cells: readonly (readonly string[])[],
  numbers: readonly (readonly number[])[],
  column: number,
): number {
  let [count, others] = [0, 0];
  for (const [row, values] of numbers.entries()) {
    if (!Number.isNaN(values[column] ?? NaN)) count += 1;
    else if (!saysNoValue(cells[row]?.[column] ?? '')) others += 1;
  }
  return count >= others ? count : 0;
}

/** A column that has the right name and the wrong content. */
function noNumbers(
  column: number,
  columns: Inspection['columns'],
  cells: readonly (readonly string[])[],
  layout: Layout,
): IntakeFailure {
  const wrong = cells.map((row) => Number.isNaN(readNumber(row[column] ?? '', layout.decimal)));
  const word = cells.findIndex((row, i) => wrong[i] && !saysNoValue(row[column] ?? ''));
  const at = word < 0 ? wrong.indexOf(true) : word;
  const line = layout.data[at]!.line;
  const cell = cells[at]![column] ?? '';
  const shown = cell === '' ? 'nothing' : `"${cell.slice(0, 40)}"`;
  return intakeFailure(
    'no-positions',
    `The column "${columns[column]!.name.slice(0, 40)}" should hold numbers, but has ${shown} in line ${line}, and too few numbers below it. Export it as plain numbers with a decimal mark, and add the file again.`,
    line,
  );
}

function noPositions(layout: Layout, columns: Inspection['columns'], roles: NamedRoles): IntakeFailure {
  const names = columns.slice(0, 8).map((one) => `"${one.name.slice(0, 40)}"`);
  const more = columns.length > 8 ? ` and ${columns.length - 8} more` : '';
  const timed = roles.time !== null || roles.frame !== null;
  const missing =
    roles.x !== null
      ? 'No column for time (or frame) was'
      : timed
        ? 'No columns for position were'
        : 'No columns for time (or frame) and position were';
  return intakeFailure(
    'no-positions',
    `${missing} found; the columns are ${names.join(', ')}${more}. Name them time or frame, x, y and track in the first line, and add the file again.`,
    layout.header?.line ?? layout.data[0]!.line,
  );
}
