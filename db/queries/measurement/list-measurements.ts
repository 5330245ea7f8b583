import type { Connection } from '../../client';
import { AppError } from '../../errors';
import type { MeasurementPage, MeasurementQuery } from '../../inputs/measurement';
import { may, type Actor } from '../../policies/may';
import { readPlace, writePlace, type Place } from './cursor';
import { describeRows } from './describe-rows';
import { findPage, type Hit } from './find-page';
import { summarise } from './summarise';

/**
 * One page of the measurements that the actor may see, with a summary of all matches on the first page.
 *
 * Sorted by D, results without one come last in either direction, newest first; the list then has two parts, and a page
 * that the first part cannot fill goes on in the second. Places are keys of a row, never a count of rows to skip, so
 * that rows which come in meanwhile neither repeat nor hide others.
 * @throws AppError forbidden - the account may not do this; bad-input - `after` is not a place in this list.
 */
export async function listMeasurements(
  db: Connection,
  actor: Actor,
  query: MeasurementQuery,
): Promise<MeasurementPage> {
  if (!may(actor, 'measurements.read', null)) throw new AppError('forbidden');
  const after = query.after === null ? null : readPlace(query.after, query.sort);
  const hits = await findHits(db, actor, query, after);
  const shown = hits.slice(0, query.limit);
  const last = hits.length > query.limit ? shown.at(-1) : undefined;
  return {
    rows: await describeRows(db, shown),
    next: last === undefined ? null : writePlace({ sort: query.sort, ...last }),
    summary: after === null ? await summarise(db, actor, query) : null,
  };
}

/** One row more than the page holds, if there is one: it tells whether another page follows. */
async function findHits(
  db: Connection,
  actor: Actor,
  query: MeasurementQuery,
  after: Place | null,
): Promise<Hit[]> {
  const wanted = query.limit + 1;
  if (query.sort === 'date-asc' || query.sort === 'date-desc') {
    return findPage(db, actor, query, { part: 'all', after, wanted });
  }
  const isPastValues = after !== null && after.d === null;
  const hits = isPastValues ? [] : await findPage(db, actor, query, { part: 'with-d', after, wanted });
  if (hits.length === wanted) return hits;
  const rest = {
    part: 'without-d',
    after: isPastValues ? after : null,
    wanted: wanted - hits.length,
  } as const;
  return [...hits, ...(await findPage(db, actor, query, rest))];
}
