import type { ReactNode } from 'react';
import { classes } from '@/components/ui/classes';

/** The column that all places share, as wide as an entry's page with its margin, so that headings stand in one line. */
export function Place({ children, className }: { children: ReactNode; className?: string }) {
  return (
    <div className={classes('mx-auto max-w-[980px] px-5 pt-8 pb-16 tab:px-8 desk:pt-14', className)}>
      {children}
    </div>
  );
}

/** A place's heading, with a quiet line under it and acts at its right. */
export function PlaceHeading({
  title,
  note,
  children,
}: {
  title: ReactNode;
  note?: ReactNode;
  children?: ReactNode;
}) {
  return (
    <div className="flex flex-wrap items-end justify-between gap-x-8 gap-y-4">
      <div>
        <h1 className="text-title">{title}</h1>
        {note ? <div className="small mt-1 text-muted">{note}</div> : null}
      </div>
      {children}
    </div>
  );
}
