import type { ColumnRoles, Inspection, LengthUnit, Missing, ReadingSpec, TimeUnit } from './types';
import { isOtherUnit, lengthUnit, timeUnit } from './units';

export const NO_LENGTH_UNIT = 'Positions have no unit in the file; they were taken as micrometres.';

interface Found {
  readonly units: ReadingSpec['units'];
  /** Units that stand in the file but cannot be converted. */
  readonly required: Missing[];
  readonly assumed: Missing[];
  readonly notes: string[];
}

/** Units from the columns' names: what stands there wins, an axis without one takes that of the other axes, else µm and s. */
export function findUnits(roles: ColumnRoles, columns: Inspection['columns']): Found {
  const found: Found = {
    units: { time: null, x: 'um', y: null, z: null },
    required: [],
    assumed: [],
    notes: [],
  };
  const { lengths, time } = {
    lengths: axisUnits(roles, columns, found),
    time: clockUnit(roles, columns, found),
  };
  return { ...found, units: { ...lengths, time } };
}

function axisUnits(roles: ColumnRoles, columns: Inspection['columns'], found: Found) {
  const own = (['x', 'y', 'z'] as const).map((axis) => {
    const column = roles[axis];
    return column === null
      ? null
      : { text: columns[column]?.unit ?? null, name: columns[column]?.name ?? axis };
  });
  const known = own.flatMap((axis) => (axis?.text ? (lengthUnit(axis.text) ?? []) : []));
  const shared = known.length > 0 && known.every((unit) => unit === known[0]) ? known[0]! : null;
  for (const axis of own) if (axis?.text) judge(axis.text, axis.name, lengthUnit, 'lengthUnit', found);
  const bare = own.some((axis) => axis !== null && lengthUnit(axis.text ?? '') === null);
  // Where a unit stands that cannot be converted, nothing is assumed: a person is asked.
  if (bare && found.required.includes('lengthUnit')) return unitsOf(own, shared);
  if (bare && shared === null) {
    found.assumed.push('lengthUnit');
    found.notes.push(NO_LENGTH_UNIT);
  } else if (bare)
    found.notes.push('One axis has no unit in the file; it was taken to have the same as the others.');
  return unitsOf(own, shared);
}

function unitsOf(own: readonly ({ readonly text: string | null } | null)[], shared: LengthUnit | null) {
  const unit = (at: 0 | 1 | 2): LengthUnit | null =>
    own[at] ? (lengthUnit(own[at].text ?? '') ?? shared ?? 'um') : null;
  return { x: unit(0) ?? 'um', y: unit(1), z: unit(2) };
}

function clockUnit(roles: ColumnRoles, columns: Inspection['columns'], found: Found): TimeUnit | null {
  if (roles.time === null) return null;
  const { name, unit: text } = columns[roles.time]!;
  const unit = timeUnit(text ?? '') ?? timeUnit(name);
  if (unit !== null) return unit;
  if (text) judge(text, name, timeUnit, 'timeUnit', found);
  if (found.required.includes('timeUnit')) return 's';
  found.assumed.push('timeUnit');
  found.notes.push('Times have no unit in the file; they were taken as seconds.');
  return 's';
}

/** A unit that exists but cannot be converted must be settled by a person; a text in brackets that is no unit is only told. */
function judge(
  text: string,
  name: string,
  convert: (text: string) => string | null,
  what: 'lengthUnit' | 'timeUnit',
  found: Found,
): void {
  if (convert(text) !== null) return;
  const shown = `"${text.slice(0, 20)}" of column "${name.slice(0, 40)}"`;
  if (!isOtherUnit(text)) {
    found.notes.push(`${shown} was not understood as a unit.`);
    return;
  }
  if (!found.required.includes(what)) found.required.push(what);
  found.notes.push(
    `The unit ${shown} cannot be converted here. Export the file in ${what === 'lengthUnit' ? 'µm, nm, mm, m or pixels' : 's, ms, µs, min or h'}, or choose the unit that the numbers are really in.`,
  );
}
