import type { IntakeFailure } from '@/analysis/intake/types';
import { AppError } from '@/db/errors';

/** What somebody has to state, or to put right, for each fault that is not one of the file itself. */
const PLACES: Partial<Record<IntakeFailure['code'], string>> = {
  'needs-frame-interval': 'frameInterval',
  'frame-interval-contradicts': 'frameInterval',
  'needs-pixel-size': 'pixelSize',
};

/** A file that cannot be read as it was confirmed; `fields` names the setting to put right, or the file's line (from 1). */
export function readingFault({ code, message, line }: IntakeFailure): AppError {
  const place = PLACES[code];
  return new AppError('unreadable', {
    sentence: message,
    fields: {
      ...(place === undefined ? {} : { [place]: message }),
      ...(line === null ? {} : { line: String(line) }),
    },
  });
}
