import { route } from '@/app/_server/route';
import { db } from '@/db/client';
import { measurementPage, measurementQuery } from '@/db/inputs/measurement';
import { listMeasurements } from '@/db/queries/measurement/list-measurements';

/** Measurements that the asker may see, a page at a time. Only what the answer's shape names leaves the server. */
export const GET = route('measurements', { query: measurementQuery }, async ({ actor, query }) => {
  const answer = measurementPage.safeParse(await listMeasurements(db(), actor, query));
  // A fault of ours, not of the asker's input: the wrapper must not take it for one.
  if (!answer.success)
    throw new Error('The answer does not have its promised shape', { cause: answer.error });
  return answer.data;
});
