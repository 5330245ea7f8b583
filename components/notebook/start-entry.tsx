'use client';

import Link from 'next/link';
import { useRouter } from 'next/navigation';
import { useState, useTransition } from 'react';
import { Button, buttonClasses } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import type { Refusal } from '@/db/errors';
import { EntryNumber } from './entry-number';

/** A notebook that the person may start entries in. */
export interface StartPlace {
  readonly id: string;
  readonly code: string;
  readonly title: string;
  /** The person's draft for today, if there is one already. */
  readonly todays: { readonly id: string; readonly number: number } | null;
}

export type StartAction = (input: {
  notebookId: string;
}) => Promise<{ ok: true; value: { entryId: string } } | { ok: false; refusal: Refusal }>;

/** Today's entry in one click, in the notebook used last; the other notebooks stand under it. */
export function StartEntry({
  places,
  start,
  named = true,
}: {
  places: readonly StartPlace[];
  start: StartAction;
  /** Whether to say which notebook it is; not where the page says so. */
  named?: boolean;
}) {
  const router = useRouter();
  const [pending, startTransition] = useTransition();
  const [chosen, setChosen] = useState<string | null>(null);
  const [fault, setFault] = useState<string | null>(null);
  const [first, ...others] = places;
  if (!first) return null;

  function begin(notebookId: string): void {
    setChosen(notebookId);
    setFault(null);
    startTransition(async () => {
      try {
        const outcome = await start({ notebookId });
        if (outcome.ok) router.push(`/entries/${outcome.value.entryId}`);
        else setFault(outcome.refusal.sentence);
      } catch (error) {
        console.warn('the entry could not be started', error);
        setFault('The server cannot be reached. No entry was started; check the network and try again.');
      }
    });
  }

  return (
    <div className="space-y-4">
      <div className="flex flex-wrap items-center gap-x-5 gap-y-3">
        {first.todays ? (
          <Link href={`/entries/${first.todays.id}`} className={buttonClasses('primary')}>
            Open today’s entry
          </Link>
        ) : (
          <Button weight="primary" busy={pending && chosen === first.id} onClick={() => begin(first.id)}>
            Start today’s entry
          </Button>
        )}
        <span className="small text-muted">
          {first.todays ? <EntryNumber code={first.code} number={first.todays.number} /> : null}
          {named ? (
            <>
              {first.todays ? ', ' : 'in '}
              {first.todays ? null : <span className="text-ink">{first.code}, </span>}
              {first.title}
            </>
          ) : null}
        </span>
      </div>
      {fault ? <Notice kind="error">{fault}</Notice> : null}
      {others.length > 0 ? (
        <div className="small flex flex-wrap items-baseline gap-x-2 text-muted">
          <span>or in</span>
          <ul className="flex flex-wrap gap-x-6">
            {others.map((place) => (
              <li key={place.id}>
                {place.todays ? (
                  <Link
                    href={`/entries/${place.todays.id}`}
                    className="link inline-flex min-h-7 items-center max-desk:min-h-11"
                  >
                    {place.code}, {place.title}: open number {place.todays.number}
                  </Link>
                ) : (
                  <button
                    type="button"
                    aria-busy={(pending && chosen === place.id) || undefined}
                    aria-label={`Start today’s entry in ${place.code}, ${place.title}`}
                    onClick={() => begin(place.id)}
                    className="link inline-flex min-h-7 items-center max-desk:min-h-11"
                  >
                    {place.code}, {place.title}
                  </button>
                )}
              </li>
            ))}
          </ul>
        </div>
      ) : null}
    </div>
  );
}
