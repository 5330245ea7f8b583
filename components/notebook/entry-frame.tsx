import type { ReactNode } from 'react';

/** The page itself: one calm surface on the paper, as wide as its text column and its margin. */
export function EntryFrame({ children }: { children: ReactNode }) {
  return (
    <article className="mx-auto flex min-h-dvh max-w-[1044px] flex-col border-rule bg-page px-5 pt-8 pb-12 tab:px-8 tab:pt-12 wide:border-x print:border-0 print:p-0">
      {children}
    </article>
  );
}
