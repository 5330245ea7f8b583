import type { ReactNode } from 'react';

/** An empty place says what will be there, and offers the first step. */
export function EmptyPlace({ children, step }: { children: ReactNode; step?: ReactNode }) {
  return (
    <div className="border-y py-8">
      <p className="max-w-measure text-text text-muted">{children}</p>
      {step ? <div className="mt-4">{step}</div> : null}
    </div>
  );
}
