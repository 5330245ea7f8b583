import { intakeFailure } from './failure';
import type { Layout } from './find-layout';
import { readNumber } from './number';
import { rolesByName, type NamedColumn } from './roles-by-name';
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
  const named: NamedColumn[] = columns.map((column, at) => ({ ...column, numeric: isNumeric(numbers, at) }));
  let roles = rolesByName(named);
  if (roles.x === null) {
    // Names that mean nothing here, or none at all; a clock or track that was named is not guessed anew.
    const placed = rolesByPlace(cells, numbers);
    const known = roles.time ?? roles.frame ?? roles.track;
    if (placed.x === null || (known !== null && !Object.values(placed).includes(known)))
      return noPositions(layout, columns);
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
    if (clock === null) return noPositions(layout, columns);
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

function noPositions(layout: Layout, columns: Inspection['columns']): IntakeFailure {
  const names = columns.slice(0, 8).map((one) => `"${one.name.slice(0, 40)}"`);
  const more = columns.length > 8 ? ` and ${columns.length - 8} more` : '';
  return intakeFailure(
    'no-positions',
    `No columns for time (or frame) and position were found; the columns are ${names.join(', ')}${more}. Name them time or frame, x, y and track in the first line, and add the file again.`,
    layout.header?.line ?? layout.data[0]!.line,
  );
}
