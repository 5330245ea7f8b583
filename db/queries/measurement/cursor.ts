import { z } from 'zod';
import { AppError } from '../../errors';
import { MEASUREMENT_SORTS, type MeasurementSort } from '../../inputs/measurement';

/**
 * Where a page of measurements ended: the sort keys of its last row. Opaque to the asker, but nothing in it is secret and
 * nothing depends on it being genuine: a forged place only starts the page elsewhere, the rights are asked again.
 */
const place = z.strictObject({
  sort: z.enum(MEASUREMENT_SORTS),
  /** D of the last row; null: the list had reached the results without D, which come last in either direction. */
  d: z.number().nullable(),
  date: z.iso.date().refine((day) => day >= '0001-01-01'),
  number: z.int32(),
  entry: z.uuid(),
  position: z.int32(),
  // A zero byte is the one character that PostgreSQL cannot hold.
  block: z
    .string()
    .max(200)
    .refine((text) => !text.includes('\0')),
});
export type Place = z.output<typeof place>;

export function writePlace(given: Place): string {
  return Buffer.from(JSON.stringify(given)).toString('base64url');
}

/** @throws AppError bad-input - not a place in a list sorted this way. */
export function readPlace(text: string, sort: MeasurementSort): Place {
  const parsed = place.safeParse(parseJson(Buffer.from(text, 'base64url').toString('utf8')));
  if (parsed.success && parsed.data.sort === sort) return parsed.data;
  throw new AppError('bad-input', {
    fields: { after: 'This is not a place in this list. Start again from its first page.' },
  });
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch (error) {
    if (error instanceof SyntaxError) return null;
    throw error;
  }
}
