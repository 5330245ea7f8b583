import { stillRequired } from './inspect-file';
import type { Inspection, LengthUnit, ReadingSpec } from './types';
import { lengthUnit } from './units';

/** What a person says about a file beside what it says itself. Numbers as decimal text. */
export interface Stated {
  readonly frameInterval?: string | null;
  /** Says that positions without a unit are pixels of this many micrometres. */
  readonly pixelSize?: string | null;
  readonly exposure?: ReadingSpec['exposure'];
}

/**
 * Puts what was stated onto the guessed reading. A unit in the header wins: where the header says µm, a pixel size changes
 * nothing, and a note says so.
 */
export function applyStated(inspection: Inspection, stated: Stated): Inspection {
  const notes = [...inspection.notes];
  const spec = { ...inspection.spec, units: { ...inspection.spec.units } };
  if (stated.frameInterval) spec.frameInterval = stated.frameInterval;
  if (stated.exposure) spec.exposure = stated.exposure;
  if (stated.pixelSize) {
    const inPixels = (column: number | null, unit: LengthUnit | null): LengthUnit | null => {
      if (column === null || unit === 'px') return unit;
      return lengthUnit(inspection.columns[column]?.unit ?? '') === null ? 'px' : unit;
    };
    const { columns, units } = inspection.spec;
    spec.units = {
      ...units,
      x: inPixels(columns.x, units.x) ?? units.x,
      y: inPixels(columns.y, units.y),
      z: inPixels(columns.z, units.z),
    };
    if ([spec.units.x, spec.units.y, spec.units.z].includes('px')) spec.pixelSize = stated.pixelSize;
    else notes.push('The header gives a unit of length, so the pixel size was not used.');
  }
  const asked = (what: string) =>
    !(what === 'lengthUnit' && spec.pixelSize) && !(what === 'exposure' && spec.exposure);
  return {
    ...inspection,
    spec,
    required: stillRequired(spec),
    assumed: inspection.assumed.filter(asked),
    notes: spec.pixelSize ? notes.filter((note) => !note.startsWith('Positions have no unit')) : notes,
  };
}
