import Link from 'next/link';
import { Button, buttonClasses } from '@/components/ui/button';
import { EmptyPlace } from '@/components/ui/empty-place';
import { Notice } from '@/components/ui/notice';
import { Skeleton } from '@/components/ui/skeleton';
import { RefusedError } from '@/components/query-provider';
import { ERRORS } from '@/db/errors';
import type { MeasurementSummary, Restriction } from '@/db/inputs/measurement';
import type { FilterChange } from './use-filters';
import { someOfBounded } from './words';

/** As high as the rows that will stand here, so that nothing jumps when they come. */
export function LoadingRows() {
  return (
    <div className="border-b">
      <p role="status" className="small h-11 text-muted min-[960px]:h-6">
        Looking …
      </p>
      <div aria-hidden className="h-14 border-b" />
      {Array.from({ length: 8 }, (_, row) => (
        <div key={row} className="h-[4.25rem] border-b px-1 py-2 last:border-b-0 max-[959px]:h-[8.25rem]">
          <Skeleton lines={2} />
        </div>
      ))}
    </div>
  );
}

/** Nothing was measured yet in any notebook that one may read. */
export function NothingYet({ mayWrite, belongs }: { mayWrite: boolean; belongs: boolean }) {
  if (!belongs) {
    return (
      <EmptyPlace>
        Every D of your notebooks will stand here. You belong to none yet; the PI or an owner of a notebook
        can add you.
      </EmptyPlace>
    );
  }
  if (!mayWrite) {
    return (
      <EmptyPlace>
        Every D of the notebooks that you read will stand here, with its interval and verdict. None has been
        measured yet.
      </EmptyPlace>
    );
  }
  return (
    <EmptyPlace
      step={
        <Link href="/" className={buttonClasses('primary')}>
          Go to Today
        </Link>
      }
    >
      Every D that your notebooks record will stand here, with its interval and verdict. The first one comes
      from an entry: drop a trajectory file on its page and confirm how it was read.
    </EmptyPlace>
  );
}

const widenWords: Readonly<Record<Restriction, string>> = {
  range: 'Ask for any D',
  verdict: 'Ask for any verdict',
  notebook: 'Ask in every notebook',
  date: 'Ask for any day',
};
const widenings: Readonly<Record<Restriction, FilterChange>> = {
  range: { dFrom: null, dTo: null },
  verdict: { verdict: [] },
  notebook: { notebook: [] },
  date: { dateFrom: null, dateTo: null },
};

/** Nothing meets the question; says which restriction costs what. */
export function NoMatch({
  summary,
  isOverlap,
  onChange,
}: {
  summary: MeasurementSummary;
  isOverlap: boolean;
  onChange: (change: FilterChange) => void;
}) {
  const helpful = summary.without.filter(({ count }) => count > 0);
  const byInside = helpful.some(({ what }) => what === 'range') && !isOverlap;
  return (
    <EmptyPlace
      step={
        helpful.length > 0 ? (
          <ul className="space-y-2">
            {helpful.map(({ what, ...count }) => (
              <li key={what} className="flex flex-wrap items-center gap-x-3">
                <Button size="small" onClick={() => onChange(widenings[what])}>
                  {widenWords[what]}
                </Button>
                <span className="label text-muted">finds {someOfBounded(count, 'measurement')}</span>
              </li>
            ))}
          </ul>
        ) : undefined
      }
    >
      No measurement that you may read meets all of this.{' '}
      {helpful.length === 1
        ? 'One change would find some:'
        : helpful.length > 1
          ? 'Each of these changes alone would find some:'
          : 'Dropping one filter alone does not help; clear all of them and start again.'}
      {byInside ? ' Or ask for intervals that overlap the range instead of values inside it.' : null}
    </EmptyPlace>
  );
}

/** The list could not be fetched: what happened, and what to do. */
export function Failed({ error, onRetry, isBusy }: { error: Error; onRetry: () => void; isBusy: boolean }) {
  const isSignedOut = error instanceof RefusedError && error.status === 401;
  return (
    <Notice
      kind="error"
      className="my-6"
      title={isSignedOut ? 'You are signed out' : 'The measurements could not be fetched'}
      action={
        isSignedOut ? (
          <a href={signInHere()} className={buttonClasses('plain', 'small')}>
            Sign in and come back here
          </a>
        ) : (
          <Button size="small" busy={isBusy} onClick={onRetry}>
            {isBusy ? 'Trying again …' : 'Try again'}
          </Button>
        )
      }
    >
      {isSignedOut
        ? 'The question stays in the address of this page.'
        : `${error instanceof RefusedError ? error.sentence : ERRORS.unexpected.sentence} Your filters are kept.`}
    </Notice>
  );
}

function signInHere(): string {
  const here =
    typeof window === 'undefined' ? '/measurements' : window.location.pathname + window.location.search;
  return `/sign-in?callbackUrl=${encodeURIComponent(here)}`;
}
