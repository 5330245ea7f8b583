'use client';

import type { ReactElement, ReactNode } from 'react';
import * as Radix from 'radix-ui/tooltip';
import { classes } from './classes';

/** A few words about something that shows too few. It only repeats what the thing's own name says to a screen reader. */
export function Tooltip({
  words,
  side = 'right',
  className,
  children,
}: {
  words: ReactNode;
  side?: 'top' | 'right' | 'bottom' | 'left';
  /** E.g. where not to show it, because the words stand in the page there. */
  className?: string;
  children: ReactElement;
}) {
  return (
    <Radix.Provider delayDuration={300}>
      <Radix.Root>
        <Radix.Trigger asChild>{children}</Radix.Trigger>
        <Radix.Portal>
          <Radix.Content
            side={side}
            sideOffset={6}
            className={classes(
              'label z-50 max-w-72 rounded-sm border bg-page px-2 py-1 text-ink shadow-float',
              className,
            )}
          >
            {words}
          </Radix.Content>
        </Radix.Portal>
      </Radix.Root>
    </Radix.Provider>
  );
}
