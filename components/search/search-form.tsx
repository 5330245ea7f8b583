import Link from 'next/link';
import { Button } from '@/components/ui/button';
import { Input } from '@/components/ui/input';

/** The words to search for: a plain form, so that a question is an address that can be kept and sent. */
export function SearchForm({
  words,
  author,
}: {
  words: string;
  author: { id: string; name: string } | null;
}) {
  return (
    <form action="/search" role="search" className="flex flex-wrap items-center gap-3">
      <label className="sr-only" htmlFor="search-words">
        Words
      </label>
      <Input
        id="search-words"
        name="q"
        type="search"
        defaultValue={words}
        key={words}
        maxLength={200}
        autoFocus={words === '' && author === null}
        placeholder="beads glycerol, “sealed chamber”, -pixels"
        className="min-w-0 grow basis-80"
      />
      {author ? <input type="hidden" name="by" value={author.id} /> : null}
      <Button type="submit" weight="primary">
        Search
      </Button>
      {author ? (
        <p className="small basis-full text-muted">
          Only entries that {author.name} wrote in.{' '}
          <Link
            href={words ? `/search?${new URLSearchParams({ q: words })}` : '/search'}
            className="text-malachite underline underline-offset-4"
          >
            Everybody’s
          </Link>
        </p>
      ) : null}
    </form>
  );
}
