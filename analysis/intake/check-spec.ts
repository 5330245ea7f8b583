import { intakeFailure } from './failure';
import { PARSER_VERSION } from './limits';
import { readNumber } from './number';
import type { IntakeFailure, ReadingSpec } from './types';

const AXES = ['x', 'y', 'z'] as const;

/** Faults of a reading that can be seen without the file; null when there are none. */
export function checkSpec(spec: ReadingSpec): IntakeFailure | null {
  const reason = faultOf(spec) ?? faultOfNumbers(spec);
  if (reason !== null) return intakeFailure('bad-spec', reason);
  if (spec.columns.frame !== null && spec.frameInterval === null) {
    return intakeFailure(
      'needs-frame-interval',
      'The file counts frames. State the time from one frame to the next, in seconds.',
    );
  }
  if (usesPixels(spec) && spec.pixelSize === null) {
    return intakeFailure(
      'needs-pixel-size',
      'Positions are in pixels. State how many micrometres a pixel is.',
    );
  }
  return null;
}

/**
 * Columns of a reading that the file does not have; null when all are there.
 * @param width - number of cells in the first row of data.
 */
export function checkColumns(spec: ReadingSpec, width: number): IntakeFailure | null {
  const beyond = Object.entries(spec.columns).find(([, at]) => at !== null && at >= width);
  if (!beyond) return null;
  return intakeFailure(
    'bad-spec',
    `Column ${Number(beyond[1]) + 1} was chosen for ${beyond[0]}, but the file has ${width} columns. Choose another one.`,
    spec.dialect.firstDataLine,
  );
}

const usesPixels = ({ units }: ReadingSpec) => [units.x, units.y, units.z].includes('px');

function faultOf(spec: ReadingSpec): string | null {
  const { columns, dialect, units } = spec;
  if (spec.parser !== PARSER_VERSION) {
    return `This reading was made with ${spec.parser}, and files are now read with ${PARSER_VERSION}. Confirm the file again.`;
  }
  if ((columns.time === null) === (columns.frame === null))
    return 'Choose either a time column or a frame column, and not both.';
  const used = Object.values(columns).filter((column): column is number => column !== null);
  if (used.some((column) => !Number.isInteger(column) || column < 0))
    return 'A column is not a whole number from 0 on. Choose the columns again.';
  if (new Set(used).size < used.length)
    return 'One column was chosen for two things. Choose each column once.';
  if (columns.z !== null && columns.y === null) return 'There is a z column but no y column.';
  for (const axis of AXES)
    if ((columns[axis] === null) !== (units[axis] === null))
      return `The ${axis} column and its unit do not belong together.`;
  if ((columns.time === null) !== (units.time === null))
    return 'The time column and its unit do not belong together.';
  if (dialect.decimal === dialect.delimiter)
    return 'The comma cannot be both the separator and the decimal mark.';
  const lines = [dialect.headerLine, dialect.unitsLine].filter((line) => line !== null);
  if (lines.some((line) => line >= dialect.firstDataLine) || dialect.firstDataLine < 1)
    return 'The lines of names and units must stand above the first line of data.';
  return null;
}

function faultOfNumbers(spec: ReadingSpec): string | null {
  const positive = (text: string | null) => text === null || readNumber(text, '.') > 0;
  if (!positive(spec.frameInterval)) return 'The frame interval must be a number of seconds above zero.';
  if (!positive(spec.pixelSize)) return 'The pixel size must be a number of micrometres above zero.';
  if (spec.exposure === null) return null;
  if ('seconds' in spec.exposure)
    return readNumber(spec.exposure.seconds, '.') >= 0 ? null : 'The exposure must be a number of seconds.';
  const fraction = readNumber(spec.exposure.fraction, '.');
  return fraction >= 0 && fraction <= 1 ? null : 'The exposure must be a fraction from 0 to 1.';
}
