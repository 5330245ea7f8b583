import { z } from 'zod';

/** The shape of a reading as a browser sends it; analysis/intake then checks it against the file itself. */
const column = z.number().int().min(0).max(999);
/** A positive number as people type it, kept as text so that its digits never change. */
export const decimalText = z
  .string()
  .trim()
  .regex(/^\d{1,15}(\.\d{1,15})?(e[+-]?\d{1,2})?$/i, 'Enter a positive number such as 0.02 (with a point).')
  .refine((text) => Number(text) > 0, 'Enter a number above zero.');
const line = z.number().int().min(1).max(1_000_000);
const lengthUnit = z.enum(['um', 'nm', 'mm', 'm', 'px']);

export const readingSpec = z.object({
  parser: z.string().max(60),
  dialect: z.object({
    encoding: z.enum(['utf-8', 'utf-16le', 'utf-16be', 'windows-1252']),
    delimiter: z.enum([',', ';', '\t', '|', ' ']),
    decimal: z.enum(['.', ',']),
    comment: z.string().max(4).nullable(),
    headerLine: line.nullable(),
    unitsLine: line.nullable(),
    firstDataLine: line,
  }),
  columns: z.object({
    track: column.nullable(),
    time: column.nullable(),
    frame: column.nullable(),
    x: column,
    y: column.nullable(),
    z: column.nullable(),
  }),
  units: z.object({
    time: z.enum(['s', 'ms', 'us', 'min', 'h']).nullable(),
    x: lengthUnit,
    y: lengthUnit.nullable(),
    z: lengthUnit.nullable(),
  }),
  frameInterval: decimalText.nullable(),
  pixelSize: decimalText.nullable(),
  exposure: z
    .union([
      z.object({ seconds: decimalText }).strict(),
      z
        .object({
          fraction: z
            .string()
            .trim()
            .regex(/^(0(\.\d{1,15})?|1(\.0{1,15})?)$/, 'Enter a fraction from 0 to 1.'),
        })
        .strict(),
    ])
    .nullable(),
});
