import type { Missing, ReadingSpec } from './types';

/** What a reading cannot be made without, as far as the reading itself tells. */
export function stillRequired(spec: ReadingSpec): Missing[] {
  const required: Missing[] = [];
  if (spec.columns.frame !== null && spec.columns.time === null && spec.frameInterval === null)
    required.push('frameInterval');
  if ([spec.units.x, spec.units.y, spec.units.z].includes('px') && spec.pixelSize === null)
    required.push('pixelSize');
  return required;
}
