'use client';

import type { ReactNode } from 'react';
import * as Radix from 'radix-ui/dialog';
import { classes } from './classes';

/**
 * A question that must be answered before going on. Escape and the word "Close" leave it; focus comes back to where it was.
 * Controlled: `open` and `onOpenChange`. What the person typed inside is the owner's state, so closing loses nothing by itself.
 */
export function Dialog({
  open,
  onOpenChange,
  title,
  description,
  width = 'normal',
  children,
}: {
  open: boolean;
  onOpenChange: (open: boolean) => void;
  title: ReactNode;
  description?: ReactNode;
  width?: 'normal' | 'wide';
  children: ReactNode;
}) {
  return (
    <Radix.Root open={open} onOpenChange={onOpenChange}>
      <Radix.Portal>
        <Radix.Overlay className="fixed inset-0 z-40 bg-black/40" />
        <Radix.Content
          {...(description ? {} : { 'aria-describedby': undefined })}
          className={classes(
            'fixed z-50 overflow-y-auto border bg-page p-6 shadow-float focus-visible:outline-none',
            'inset-x-0 bottom-0 max-h-[92dvh] tab:inset-x-auto tab:top-1/2 tab:bottom-auto tab:left-1/2 tab:w-[calc(100%-3rem)]',
            'tab:max-h-[88dvh] tab:-translate-x-1/2 tab:-translate-y-1/2 tab:rounded-md',
            width === 'wide' ? 'tab:max-w-4xl' : 'tab:max-w-lg',
          )}
        >
          <div className="flex items-baseline justify-between gap-6 border-b pb-3">
            <Radix.Title className="text-heading">{title}</Radix.Title>
            <Radix.Close className="small inline-flex min-h-6 items-center text-muted underline-offset-4 hover:text-ink hover:underline max-desk:min-h-11 pointer-coarse:min-h-11">
              Close
            </Radix.Close>
          </div>
          {description ? (
            <Radix.Description className="small mt-3 max-w-measure text-muted">
              {description}
            </Radix.Description>
          ) : null}
          <div className="mt-4">{children}</div>
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}
