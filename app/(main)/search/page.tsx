import Link from 'next/link';
import { notFound } from 'next/navigation';
import { getCurrentActor } from '@/app/_server/actor';
import { FoundList } from '@/components/search/found-list';
import { SearchForm } from '@/components/search/search-form';
import { Place, PlaceHeading } from '@/components/shell/place';
import { buttonClasses } from '@/components/ui/button';
import { EmptyPlace } from '@/components/ui/empty-place';
import { db } from '@/db/client';
import { searchQuery, type SearchQuery } from '@/db/inputs/search';
import { may } from '@/db/policies/may';
import { findColleague } from '@/db/queries/search/find-colleague';
import { searchEntries, type Found } from '@/db/queries/search/search-entries';

export const metadata = { title: 'Search' };

export default async function SearchPage({
  searchParams,
}: {
  searchParams: Promise<Record<string, string | string[] | undefined>>;
}) {
  const actor = await getCurrentActor();
  if (!may(actor, 'search.read', null)) notFound();
  const given = await searchParams;
  const query = searchQuery.parse({
    q: first(given.q) ?? '',
    by: first(given.by) ?? null,
    page: first(given.page) ?? 1,
  });
  const author = query.by === null ? null : await findColleague(db(), actor, query.by);
  const asked = { ...query, by: author?.id ?? null };
  const found = await searchEntries(db(), actor, asked);
  return (
    <Place>
      <PlaceHeading title="Search" note="The text of every entry that you may read." />
      <div className="mt-8">
        <SearchForm words={query.q} author={author} />
      </div>
      <div className="mt-8">
        <Outcome query={asked} found={found} />
      </div>
    </Place>
  );
}

const first = (value: string | string[] | undefined) => (Array.isArray(value) ? value[0] : value);

function Outcome({ query, found }: { query: SearchQuery; found: Found }) {
  if (query.q === '' && query.by === null) {
    return (
      <EmptyPlace>
        Type words as they stand in a title, a text, a caption or a file’s remark. In quotes they must stand
        together; a minus before a word leaves entries with it out.
      </EmptyPlace>
    );
  }
  if (found.count === 0) {
    return (
      <EmptyPlace>
        No entry that you may read has these words.
        {found.alike.length > 0 ? (
          <>
            {' '}
            Titles that look like them:{' '}
            {found.alike.map(({ id, title }, at) => (
              <span key={id}>
                {at > 0 ? ', ' : null}
                <Link href={`/entries/${id}`} className="text-malachite underline underline-offset-4">
                  {title}
                </Link>
              </span>
            ))}
            .
          </>
        ) : null}
      </EmptyPlace>
    );
  }
  return (
    <section aria-label="Found entries">
      <p role="status" className="small mb-3">
        {found.count >= 1000
          ? 'A thousand entries or more'
          : `${found.count} ${found.count === 1 ? 'entry' : 'entries'}`}
        {found.pages > 1 ? (
          <span className="text-muted">
            , page {query.page} of {found.pages}
          </span>
        ) : null}
      </p>
      <FoundList entries={found.entries} />
      {found.pages > 1 ? (
        <nav aria-label="Pages" className="mt-6 flex gap-3">
          {query.page > 1 ? <PageLink query={query} page={query.page - 1} words="Better matches" /> : null}
          {query.page < found.pages ? <PageLink query={query} page={query.page + 1} words="More" /> : null}
        </nav>
      ) : null}
    </section>
  );
}

function PageLink({ query, page, words }: { query: SearchQuery; page: number; words: string }) {
  const address = new URLSearchParams({
    ...(query.q ? { q: query.q } : {}),
    ...(query.by ? { by: query.by } : {}),
    page: String(page),
  });
  return (
    <Link href={`/search?${address}`} className={buttonClasses()}>
      {words}
    </Link>
  );
}
