'use client';

import { useSearchParams } from 'next/navigation';
import { useCallback, useEffect, useMemo, useRef, useState } from 'react';
import type { MeasurementFilters } from '@/db/inputs/measurement';
import { readFilters, writeFilters, type UrlFaults } from './filters-in-url';

export type FilterChange = Partial<MeasurementFilters>;

/**
 * The question, kept in the page's address and nowhere else: reload, the back button and a passed-on link all give it
 * back. `change` adds a step to the history; while somebody goes on typing in one field (`typing` names it), the steps
 * become one.
 */
export function useFilters(): {
  filters: MeasurementFilters;
  faults: UrlFaults;
  change: (change: FilterChange, typing?: string) => void;
  endTyping: () => void;
} {
  const told = useSearchParams().toString();
  // The router tells of a new address a little later. Until then a box that was just ticked must not fall back, and a
  // second one must build on the first: the address as it was written here holds at once.
  const [heard, setHeard] = useState(told);
  const [query, setQuery] = useState(told);
  if (heard !== told) {
    setHeard(told);
    setQuery(queryOfAddress());
  }
  const { filters, faults } = useMemo(() => readFilters(new URLSearchParams(query)), [query]);
  const typedLast = useRef<string | null>(null);
  const endTyping = useCallback(() => {
    typedLast.current = null;
  }, []);
  useEffect(() => {
    window.addEventListener('popstate', endTyping);
    return () => window.removeEventListener('popstate', endTyping);
  }, [endTyping]);
  const change = useCallback((changed: FilterChange, typing?: string) => {
    // From the address, not from the last drawing: two fields may change between two drawings.
    const now = readFilters(new URLSearchParams(queryOfAddress())).filters;
    const next = writeFilters({ ...now, ...changed }).toString();
    if (next === queryOfAddress()) return;
    setQuery(next);
    const address = window.location.pathname + (next === '' ? '' : `?${next}`);
    const goesOn = typing !== undefined && typing === typedLast.current;
    typedLast.current = typing ?? null;
    if (goesOn) window.history.replaceState(null, '', address);
    else window.history.pushState(null, '', address);
  }, []);
  return { filters, faults, change, endTyping };
}

const queryOfAddress = (): string => window.location.search.slice(1);
