'use client';

import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { useState, type ReactNode } from 'react';

/** Data that pages fetch for themselves. Faults of the person's own are not asked for again; a lost line is, twice. */
export function QueryProvider({ children }: { children: ReactNode }) {
  const [client] = useState(
    () =>
      new QueryClient({
        defaultOptions: {
          queries: {
            staleTime: 5_000,
            retry: (count, error) => count < 2 && !(error instanceof RefusedError && error.status < 500),
          },
        },
      }),
  );
  return <QueryClientProvider client={client}>{children}</QueryClientProvider>;
}

/** A request that the server refused, with the sentence for the person. */
export class RefusedError extends Error {
  constructor(
    readonly status: number,
    readonly sentence: string,
    readonly fields: Readonly<Record<string, string>>,
  ) {
    super(sentence);
  }
}
