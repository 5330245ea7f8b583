import { route } from '@/app/_server/route';
import { db } from '@/db/client';
import { AppError } from '@/db/errors';
import { goToQuery } from '@/db/inputs/search';
import { may } from '@/db/policies/may';
import { goTo } from '@/db/queries/search/go-to';

/** Where a few typed letters may lead: entries, notebooks and people that the asker may see. */
export const GET = route('go-to', { query: goToQuery }, async ({ actor, query }) => {
  if (!may(actor, 'search.read', null)) throw new AppError('not-found');
  return goTo(db(), actor, query.q);
});
