import type { Connection } from '../../client';
import { AppError } from '../../errors';
import { findLab, type Lab } from './find-lab';

/** The group of this server. @throws AppError unexpected - nobody has set it up: without a time zone there is no day. */
export async function getLab(db: Connection): Promise<Lab> {
  const found = await findLab(db);
  if (found) return found;
  throw new AppError('unexpected', {
    message: 'the table lab is empty',
    sentence: 'This server has no group yet. Make the first account with npm run add-person.',
  });
}
