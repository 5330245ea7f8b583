import { PARSER_VERSION } from './limits';
import type { IntakeFailure, ReadingSpec } from './types';

/** Faults of a reading that can be seen without the file; null when there are none. */
export function checkSpec(spec: ReadingSpec): IntakeFailure | null {
  const fail = (code: IntakeFailure['code'], message: string): IntakeFailure => ({
    failed: true,
    code,
    message,
    line: null,
  });
  const { columns, units } = spec;
  if (spec.parser !== PARSER_VERSION) {
    return fail(
      'bad-spec',
      `This reading was made with ${spec.parser}, and files are now read with ${PARSER_VERSION}. Confirm the file again.`,
    );
  }
  if ((columns.time === null) === (columns.frame === null)) {
    return fail('bad-spec', 'Choose either a time column or a frame column, and not both.');
  }
  const used = Object.values(columns).filter((column): column is number => column !== null);
  if (new Set(used).size < used.length)
    return fail('bad-spec', 'One column was chosen for two things. Choose each column once.');
  if (spec.dialect.decimal === spec.dialect.delimiter)
    return fail('bad-spec', 'The comma cannot be both the separator and the decimal mark.');
  for (const axis of ['y', 'z'] as const) {
    if ((columns[axis] === null) !== (units[axis] === null))
      return fail('bad-spec', `The ${axis} column and its unit do not belong together.`);
  }
  if (columns.z !== null && columns.y === null)
    return fail('bad-spec', 'There is a z column but no y column.');
  if (columns.frame !== null && spec.frameInterval === null) {
    return fail(
      'needs-frame-interval',
      'The file counts frames. State the time from one frame to the next, in seconds.',
    );
  }
  if ([units.x, units.y, units.z].includes('px') && spec.pixelSize === null) {
    return fail('needs-pixel-size', 'Positions are in pixels. State how many micrometres a pixel is.');
  }
  return null;
}
