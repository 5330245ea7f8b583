'use client';

import Link from 'next/link';
import { usePathname } from 'next/navigation';
import type { ReactNode } from 'react';
import { GoTo } from '@/components/search/go-to';
import { classes } from '@/components/ui/classes';
import { Tooltip } from '@/components/ui/tooltip';
import { ProductMark } from '@/components/ui/walk-mark';
import { MeasurementsIcon, NotebooksIcon, PeopleIcon, SearchIcon, TodayIcon } from './place-icons';

interface Place {
  readonly href: string;
  readonly word: string;
  readonly icon: ReactNode;
  /** Whether an address lies in this place. */
  readonly holds: (path: string) => boolean;
}

const places: readonly Place[] = [
  { href: '/', word: 'Today', icon: <TodayIcon />, holds: (path) => path === '/' },
  {
    href: '/notebooks',
    word: 'Notebooks',
    icon: <NotebooksIcon />,
    holds: (path) => path.startsWith('/notebooks') || path.startsWith('/entries'),
  },
  {
    href: '/measurements',
    word: 'Measurements',
    icon: <MeasurementsIcon />,
    holds: (path) => path.startsWith('/measurements'),
  },
  { href: '/search', word: 'Search', icon: <SearchIcon />, holds: (path) => path.startsWith('/search') },
];

const people: Place = {
  href: '/people',
  word: 'People',
  icon: <PeopleIcon />,
  holds: (path) => path.startsWith('/people'),
};

/**
 * The places of the product: words at the left on a wide screen, drawings with their words on hover on a tablet, a bar at
 * the bottom on a phone. `person` is the menu of whoever is signed in; `keepsHouse` tells whether the place of the people is theirs too.
 */
export function Spine({ person, keepsHouse }: { person: ReactNode; keepsHouse: boolean }) {
  const path = usePathname();
  return (
    <header
      className={classes(
        'fixed z-30 flex bg-paper print:hidden',
        'inset-x-0 bottom-0 h-14 items-stretch border-t pb-[env(safe-area-inset-bottom)] box-content',
        'tab:inset-y-0 tab:right-auto tab:h-auto tab:w-16 tab:flex-col tab:border-t-0 tab:border-r tab:pb-0 tab:box-border',
        'desk:w-44',
      )}
    >
      <Link
        href="/"
        className="hidden items-center gap-2.5 text-malachite tab:flex tab:h-16 tab:justify-center desk:justify-start desk:px-5"
      >
        <ProductMark size={26} />
        <span className="font-serif text-[1.0625rem] font-bold text-ink max-desk:sr-only">Motebook</span>
      </Link>
      <nav aria-label="Places" className="grow tab:grow-0 desk:mt-4">
        <ul className="flex h-full tab:flex-col">
          {(keepsHouse ? [...places, people] : places).map((place) => (
            <li key={place.href} className="grow tab:grow-0">
              <PlaceLink place={place} current={place.holds(path)} />
            </li>
          ))}
        </ul>
      </nav>
      <GoTo
        trigger={(open) => (
          <button
            type="button"
            onClick={open}
            aria-keyshortcuts="Control+Comma"
            className="label hidden text-muted hover:text-ink tab:block tab:min-h-11 tab:px-1 tab:text-center desk:mt-3 desk:min-h-9 desk:px-5 desk:text-left"
          >
            Go to …
          </button>
        )}
      />
      <div className="flex grow-0 items-center justify-center tab:mt-auto tab:py-3 desk:justify-start desk:px-2">
        {person}
      </div>
    </header>
  );
}

function PlaceLink({ place, current }: { place: Place; current: boolean }) {
  return (
    <Tooltip words={place.word} className="max-tab:hidden desk:hidden">
      <Link
        href={place.href}
        aria-current={current ? 'page' : undefined}
        className={classes(
          'relative flex h-full flex-col items-center justify-center gap-0.5 font-sans hover:text-ink',
          'tab:h-12 desk:h-9 desk:flex-row desk:justify-start desk:px-5',
          current ? 'text-ink' : 'text-muted',
        )}
      >
        {current ? (
          <span
            aria-hidden
            className="absolute inset-x-2 top-[-1px] h-0.5 bg-malachite tab:inset-x-auto tab:inset-y-2 tab:left-0 tab:h-auto tab:w-0.5"
          />
        ) : null}
        <span className="desk:hidden">{place.icon}</span>
        <span
          className={classes(
            'text-fine tab:max-desk:sr-only desk:text-small',
            current && 'desk:font-semibold',
          )}
        >
          {place.word}
        </span>
      </Link>
    </Tooltip>
  );
}
