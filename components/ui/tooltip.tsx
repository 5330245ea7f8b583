'use client';

import type { ReactElement, ReactNode } from 'react';
import * as Radix from 'radix-ui/tooltip';

/** A few words about something that shows too few. It only repeats what the thing's own name says to a screen reader. */
export function Tooltip({
  words,
  side = 'right',
  children,
}: {
  words: ReactNode;
  side?: 'top' | 'right' | 'bottom' | 'left';
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
            className="label z-50 max-w-72 rounded-sm border bg-page px-2 py-1 text-ink shadow-float"
          >
            {words}
          </Radix.Content>
        </Radix.Portal>
      </Radix.Root>
    </Radix.Provider>
  );
}
