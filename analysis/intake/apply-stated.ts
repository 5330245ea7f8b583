import { NO_LENGTH_UNIT } from './find-units';
import { stillRequired } from './required';
import type { ColumnRoles, Inspection, LengthUnit, Missing, ReadingSpec, TimeUnit } from './types';
import { isOtherUnit, lengthUnit, timeUnit } from './units';

/** What a person says about a file beside what it says itself. Numbers as decimal text. */
export interface Stated {
  readonly frameInterval?: string | null;
  /** Says that positions without a unit are pixels of this many micrometres. */
  readonly pixelSize?: string | null;
  readonly exposure?: ReadingSpec['exposure'];
  /** Columns chosen by hand; the others stay as guessed. Choosing a time gives up the frame, and the other way round. */
  readonly columns?: Partial<ColumnRoles>;
  /** Units chosen by hand win over everything, for a person has seen the header. */
  readonly units?: Partial<ReadingSpec['units']>;
}

/**
 * Puts what was stated onto the guessed reading and says what is still missing. A unit in the header wins over a pixel size:
 * where the header says µm, the pixel size changes nothing, `spec.pixelSize` stays null and a note says so.
 */
export function applyStated(inspection: Inspection, stated: Stated): Inspection {
  const chosen = withColumns(inspection, stated.columns ?? {});
  const spec = withPixels(
    inspection,
    {
      ...chosen,
      units: { ...chosen.units, ...definedOnly(stated.units ?? {}) },
      frameInterval: stated.frameInterval ?? chosen.frameInterval,
      exposure: stated.exposure ?? chosen.exposure,
    },
    stated,
  );
  const settled = (what: Missing): boolean => {
    if (what === 'exposure') return spec.exposure !== null;
    if (what === 'lengthUnit') return spec.pixelSize !== null || stated.units?.x !== undefined;
    return what === 'timeUnit' && (spec.columns.time === null || stated.units?.time !== undefined);
  };
  const notes = inspection.notes.filter((note) => note !== NO_LENGTH_UNIT || !settled('lengthUnit'));
  if (stated.pixelSize && spec.pixelSize === null)
    notes.push('The header gives a unit of length, so the pixel size was not used.');
  return {
    ...inspection,
    spec,
    required: [...stillRequired(spec), ...unitsToSettle(inspection, spec, stated)],
    assumed: inspection.assumed.filter((what) => !settled(what)),
    notes,
  };
}

/** Only a person can settle a unit that stands above a column and cannot be converted. */
function unitsToSettle({ columns }: Inspection, spec: ReadingSpec, { units }: Stated): Missing[] {
  const other = (column: number | null) => column !== null && isOtherUnit(columns[column]?.unit ?? '');
  const { x, y, z, time } = spec.columns;
  const settle: Missing[] = [];
  if (units?.x === undefined && [x, y, z].some(other)) settle.push('lengthUnit');
  if (units?.time === undefined && other(time)) settle.push('timeUnit');
  return settle;
}

/** Undefined means "as guessed", also when a caller writes it out. */
function definedOnly<T extends object>(partial: T): T {
  return Object.fromEntries(Object.entries(partial).filter(([, value]) => value !== undefined)) as T;
}

function withColumns(inspection: Inspection, stated: Partial<ColumnRoles>): ReadingSpec {
  const { spec } = inspection;
  const own = definedOnly(stated);
  const columns = { ...spec.columns, ...own };
  if (typeof own.time === 'number') columns.frame = own.frame ?? null;
  else if (typeof own.frame === 'number') columns.time = null;
  const unitOf = (column: number | null, before: LengthUnit | null): LengthUnit | null => {
    if (column === null) return null;
    const text = inspection.columns[column]?.unit ?? '';
    return lengthUnit(text) ?? (isOtherUnit(text) ? 'um' : (before ?? spec.units.x));
  };
  return {
    ...spec,
    columns,
    units: {
      time: timeOf(inspection, columns.time),
      x: unitOf(columns.x, spec.units.x) ?? spec.units.x,
      y: unitOf(columns.y, spec.units.y),
      z: unitOf(columns.z, spec.units.z),
    },
  };
}

/** The unit of a time column: the guessed one's as found, another one's from its own header, else seconds. */
function timeOf({ spec, columns }: Inspection, time: number | null): TimeUnit | null {
  if (time === null) return null;
  if (time === spec.columns.time) return spec.units.time ?? 's';
  const { unit, name } = columns[time] ?? { unit: null, name: '' };
  return timeUnit(unit ?? '') ?? timeUnit(name) ?? 's';
}

/** Positions whose header has no unit become pixels, when the size of one is stated. */
function withPixels(inspection: Inspection, spec: ReadingSpec, stated: Stated): ReadingSpec {
  if (!stated.pixelSize) return spec;
  const inPixels = (axis: 'x' | 'y' | 'z'): LengthUnit | null => {
    const column = spec.columns[axis];
    if (column === null || stated.units?.[axis] !== undefined) return spec.units[axis];
    const text = inspection.columns[column]?.unit ?? '';
    if (lengthUnit(text) !== null || isOtherUnit(text)) return spec.units[axis];
    return othersHaveUnit(inspection, spec) ? spec.units[axis] : 'px';
  };
  const units = { ...spec.units, x: inPixels('x') ?? spec.units.x, y: inPixels('y'), z: inPixels('z') };
  const used = [units.x, units.y, units.z].includes('px');
  return { ...spec, units, pixelSize: used ? stated.pixelSize : null };
}

const othersHaveUnit = (inspection: Inspection, { columns }: ReadingSpec) =>
  [columns.x, columns.y, columns.z].some(
    (column) => column !== null && lengthUnit(inspection.columns[column]?.unit ?? '') !== null,
  );
