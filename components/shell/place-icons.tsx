import type { ReactNode } from 'react';

/** Small drawings for the places, of one hand: a 20-unit square, lines of 1.5. They stand in where there is no room for words. */
function Drawing({ children }: { children: ReactNode }) {
  return (
    <svg
      aria-hidden
      viewBox="0 0 20 20"
      className="size-5 shrink-0 fill-none stroke-current"
      strokeWidth={1.5}
      strokeLinecap="round"
      strokeLinejoin="round"
    >
      {children}
    </svg>
  );
}

/** A page with today's first line. */
export function TodayIcon() {
  return (
    <Drawing>
      <path d="M4.5 2.5h11v15h-11z" />
      <path d="M10 7h2.5" />
      <circle cx="7.5" cy="7" r="1" className="fill-current stroke-none" />
      <path d="M7 11h6M7 14h4" opacity="0.6" />
    </Drawing>
  );
}

/** Two bound books on a shelf. */
export function NotebooksIcon() {
  return (
    <Drawing>
      <path d="M3.5 3h5v14h-5zM8.5 3h4v14h-4z" />
      <path d="M13.2 4.2l3.4-.9 2 13-3.3.6z" transform="translate(-1)" />
      <path d="M3.5 13.5h5" opacity="0.6" />
    </Drawing>
  );
}

/** A value with its interval above an axis. */
export function MeasurementsIcon() {
  return (
    <Drawing>
      <path d="M2.5 16.5h15M5.5 16.5v-1.5M10 16.5v-1.5M14.5 16.5v-1.5" />
      <path d="M4.5 6.5h2.7M12.3 6.5h2.9M4.5 5v3M15.2 5v3" />
      <circle cx="9.8" cy="6.5" r="2.3" />
    </Drawing>
  );
}

/** A page under a glass. */
export function SearchIcon() {
  return (
    <Drawing>
      <path d="M4 2.5h8.5v6M4 2.5v15h5" opacity="0.6" />
      <circle cx="12.5" cy="12.5" r="3.4" />
      <path d="M15 15l3 3" />
    </Drawing>
  );
}

/** Two people beside each other. */
export function PeopleIcon() {
  return (
    <Drawing>
      <circle cx="7" cy="6.5" r="2.6" />
      <path d="M2.5 16.5c0-3 2-5 4.5-5s4.5 2 4.5 5" />
      <path d="M12.5 4.2a2.4 2.4 0 0 1 0 4.6M14 11.8c2 .5 3.3 2.3 3.5 4.7" opacity="0.6" />
    </Drawing>
  );
}
