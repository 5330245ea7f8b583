'use client';

import { keepPreviousData, useInfiniteQuery } from '@tanstack/react-query';
import { fetchJson } from '@/components/fetch-json';
import { measurementPage, type MeasurementFilters } from '@/db/inputs/measurement';
import { writeFilters } from './filters-in-url';

/** The answer to a question, page after page. While a new question is under way, the last answer stays in sight. */
export function useMeasurements(filters: MeasurementFilters) {
  const question = writeFilters(filters).toString();
  return useInfiniteQuery({
    queryKey: ['measurements', question],
    queryFn: ({ pageParam, signal }) => {
      const query = writeFilters(filters);
      if (pageParam !== null) query.set('after', pageParam);
      return fetchJson(`/api/measurements?${query}`, measurementPage, { signal });
    },
    initialPageParam: null as string | null,
    getNextPageParam: (page) => page.next,
    placeholderData: keepPreviousData,
    // Without a line the question fails and says so; by default it would wait in silence.
    networkMode: 'always',
  });
}

export type MeasurementList = ReturnType<typeof useMeasurements>;
