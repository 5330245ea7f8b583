import { decodeFile, type DecodedText } from './decode';
import { findLayout, type Layout } from './find-layout';
import { isNoUnit } from './find-names';
import { findRoles } from './find-roles';
import { findUnits } from './find-units';
import { PARSER_VERSION, PREVIEW_ROWS } from './limits';
import { stillRequired } from './required';
import { withPlainBreaks } from './rows';
import type { Inspection, IntakeFailure, ReadingSpec } from './types';
import { splitNameAndUnit, withoutBrackets } from './units';

/**
 * What can be understood of a file without asking anybody: dialect, columns, units; what is missing and what was assumed.
 * Understands general English column names only. Never throws on any bytes.
 * @param name - the file's name; only its ending is looked at, and never trusted.
 */
export function inspectFile(bytes: Uint8Array, name: string): Inspection | IntakeFailure {
  const decoded = decodeFile(bytes);
  if ('failed' in decoded) return decoded;
  const text = withPlainBreaks(decoded.text);
  if (typeof text !== 'string') return text;
  const layout = findLayout(text);
  if ('failed' in layout) return layout;
  const columns = describeColumns(layout);
  const notes = fileNotes(decoded, layout, name);
  const roles = findRoles(layout, columns, notes);
  if ('failed' in roles) return roles;
  const found = findUnits(roles, columns);
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
    units: found.units,
    frameInterval: null,
    pixelSize: null,
    exposure: null,
  };
  return {
    failed: false,
    spec,
    columns,
    rows: layout.data.slice(0, PREVIEW_ROWS).map((row) => row.cells),
    required: [...stillRequired(spec), ...found.required],
    assumed: ['exposure', ...found.assumed],
    notes: [...notes, ...found.notes],
  };
}

/** One entry for each column of the widest of the first rows. */
function describeColumns(layout: Layout): Inspection['columns'] {
  const width = layout.data.slice(0, 50).reduce((most, row) => Math.max(most, row.cells.length), 0);
  return Array.from({ length: width }, (_, column) => {
    const header = layout.header?.cells[column] ?? '';
    const named = splitNameAndUnit(header);
    const below = withoutBrackets(layout.units?.cells[column] ?? '');
    return {
      name: named.name === '' ? `column ${column + 1}` : named.name,
      unit: isNoUnit(below) ? named.unit : below,
      sample: layout.data.slice(0, 4).map((row) => row.cells[column] ?? ''),
    };
  });
}

const ENDINGS = ['csv', 'tsv', 'txt', 'dat', 'tab', 'asc'];

function fileNotes(decoded: DecodedText, layout: Layout, name: string): string[] {
  const notes = decoded.note === null ? [] : [decoded.note];
  const dot = name.lastIndexOf('.');
  const ending = dot < 0 ? '' : name.slice(dot + 1).toLowerCase();
  if (ending !== '' && !ENDINGS.includes(ending)) {
    notes.push(
      `The name ends in ".${ending.slice(0, 12)}", but the content is a table of text; it was read as one.`,
    );
  }
  if (layout.decimal === ',' && couldBeThousands(layout)) {
    notes.push(
      'Commas were read as decimal marks. If they separate thousands ("1,234" for one thousand and more), export the file without them.',
    );
  }
  return notes;
}

/** Whether every number with a comma has exactly three digits after it and does not begin with 0. */
function couldBeThousands(layout: Layout): boolean {
  const withComma = layout.data.flatMap((row) => row.cells.filter((cell) => cell.includes(',')));
  return withComma.every((cell) => {
    const bare = cell.startsWith('-') || cell.startsWith('+') ? cell.slice(1) : cell;
    const mark = bare.indexOf(',');
    return mark >= 1 && mark <= 3 && !bare.startsWith('0') && bare.length - mark === 4;
  });
}
