import type { ReactNode } from 'react';

/** Text for those who listen: it takes no room on the page. */
export function VisuallyHidden({ children }: { children: ReactNode }) {
  return <span className="sr-only">{children}</span>;
}
