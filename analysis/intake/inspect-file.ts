import { decodeFile } from './decode';
import { findLayout, type Layout } from './find-layout';
import { PARSER_VERSION } from './limits';
import { readNumber } from './number';
import { rolesByName, rolesByPlace } from './roles';
import type {
  ColumnRoles,
  Inspection,
  IntakeFailure,
  LengthUnit,
  Missing,
  ReadingSpec,
  TimeUnit,
} from './types';
import { lengthUnit, splitNameAndUnit, timeUnit } from './units';

/**
 * What can be understood of a file without asking anybody: dialect, columns, units; what is missing and what was assumed.
 * Understands general English column names only. Never throws on any bytes.
 * @param name - the file's name; only its ending is looked at, and never trusted.
 */
export function inspectFile(bytes: Uint8Array, name: string): Inspection | IntakeFailure {
  const decoded = decodeFile(bytes);
  if ('failed' in decoded) return decoded;
  const layout = findLayout(decoded.text);
  if ('failed' in layout) return layout;
  const columns = describeColumns(layout);
  const notes = decoded.note ? [decoded.note] : [];
  const ending = name.includes('.') ? name.slice(name.lastIndexOf('.') + 1).toLowerCase() : '';
  if (ending !== '' && !['csv', 'tsv', 'txt', 'dat', 'tab'].includes(ending)) {
    notes.push(
      `The name ends in ".${ending.slice(0, 12)}", but the content is a table of text; it was read as one.`,
    );
  }
  const roles = findRoles(layout, columns, notes);
  if ('failed' in roles) return roles;
  if (roles.track === null) notes.push('There is no track column, so all rows were taken as one track.');

  const assumed: Missing[] = ['exposure'];
  const length = (column: number | null): LengthUnit | null => {
    if (column === null) return null;
    const unit = lengthUnit(columns[column]?.unit ?? '');
    if (unit === null && !assumed.includes('lengthUnit')) {
      assumed.push('lengthUnit');
      notes.push('Positions have no unit in the file; they were taken as micrometres.');
    }
    return unit ?? 'um';
  };
  const units = {
    x: length(roles.x) ?? 'um',
    y: length(roles.y),
    z: length(roles.z),
    time: timeOf(roles, columns, assumed, notes),
  };
  const spec: ReadingSpec = {
    parser: PARSER_VERSION,
    dialect: {
      encoding: decoded.encoding,
      delimiter: layout.delimiter,
      decimal: layout.decimal,
      comment: layout.comment,
      headerLine: layout.header?.line ?? null,
      unitsLine: layout.units?.line ?? null,
      firstDataLine: layout.data[0]!.line,
    },
    columns: roles,
    units,
    frameInterval: null,
    pixelSize: null,
    exposure: null,
  };
  return {
    failed: false,
    spec,
    columns,
    rows: layout.data.slice(0, 12).map((row) => row.cells),
    required: stillRequired(spec),
    assumed,
    notes,
  };
}

/** What a reading cannot be made without. */
export function stillRequired(spec: ReadingSpec): Missing[] {
  const required: Missing[] = [];
  if (spec.columns.frame !== null && spec.columns.time === null && spec.frameInterval === null)
    required.push('frameInterval');
  if ([spec.units.x, spec.units.y, spec.units.z].includes('px') && spec.pixelSize === null)
    required.push('pixelSize');
  return required;
}

function describeColumns(layout: Layout): Inspection['columns'] {
  const width = Math.max(...layout.data.slice(0, 50).map((row) => row.cells.length));
  return Array.from({ length: width }, (_, column) => {
    const header = layout.header?.cells[column] ?? '';
    const named = splitNameAndUnit(header);
    const below = layout.units?.cells[column] ?? '';
    const bare = below.replace('(', '').replace(')', '').replace('[', '').replace(']', '').trim();
    return {
      name: header === '' ? `column ${column + 1}` : named.name,
      unit: (bare === '' || bare === '-' ? null : bare) ?? named.unit,
      sample: layout.data.slice(0, 4).map((row) => row.cells[column] ?? ''),
    };
  });
}

function findRoles(
  layout: Layout,
  columns: Inspection['columns'],
  notes: string[],
): ColumnRoles | IntakeFailure {
  const named = layout.header ? rolesByName(layout.header.cells) : null;
  const complete = named && named.x !== null && (named.time !== null || named.frame !== null);
  const found = complete ? named : byPlace(layout, named);
  if (!found || found.x === null || (found.time === null && found.frame === null)) {
    return {
      failed: true,
      code: 'no-positions',
      message: `No columns for time (or frame) and position were found; the columns are ${columns
        .slice(0, 8)
        .map((one) => `"${one.name}"`)
        .join(', ')}. Name them time or frame, x, y and track, or choose them by hand.`,
      line: layout.header?.line ?? layout.data[0]!.line,
    };
  }
  if (!complete) {
    notes.push(
      layout.header
        ? 'The column names were not understood; columns were guessed by their place. Check them.'
        : 'The file has no column names; columns were guessed by their place. Check them.',
    );
  }
  // One clock only: measured times say more than frame numbers.
  return {
    track: found.track,
    time: found.time,
    frame: found.time === null ? found.frame : null,
    x: found.x,
    y: found.y,
    z: found.z,
  };
}

function byPlace(layout: Layout, named: ReturnType<typeof rolesByName> | null) {
  const sample = layout.data
    .slice(0, 50)
    .map((row) => row.cells.map((cell) => readNumber(cell, layout.decimal)));
  const guess = rolesByPlace(sample, layout.data[0]!.cells.length);
  // A header that names at least positions is a header of something else when it names no clock.
  return named?.x !== null && named !== null && !guess ? null : guess;
}

function timeOf(
  roles: ColumnRoles,
  columns: Inspection['columns'],
  assumed: Missing[],
  notes: string[],
): TimeUnit | null {
  if (roles.time === null) return null;
  const unit = timeUnit(columns[roles.time]?.unit ?? '');
  if (unit === null) {
    assumed.push('timeUnit');
    notes.push('Times have no unit in the file; they were taken as seconds.');
  }
  return unit ?? 's';
}
