'use client';

import { useQuery } from '@tanstack/react-query';
import { createContext, useContext, useMemo, type ReactNode } from 'react';
import { fetchJson } from '@/components/fetch-json';
import { blockAnswer, type AvailableReading, type BlockState } from '@/db/inputs/block-answer';
import type { BlockAttributes } from '@/db/inputs/block-settings';
import { findBlock, phaseOf, type BlockPhase } from './block-phase';

interface Surroundings {
  readonly entryId: string;
  /** The lab's, for times; null: none are shown. */
  readonly timeZone: string | null;
}

const Entry = createContext<Surroundings | null>(null);

/** Tells the blocks of an entry's text which entry they stand in. Needs a QueryProvider above it. */
export function BlocksProvider({
  entryId,
  timeZone = null,
  children,
}: {
  entryId: string;
  timeZone?: string | null;
  children: ReactNode;
}) {
  const surroundings = useMemo(() => ({ entryId, timeZone }), [entryId, timeZone]);
  return <Entry.Provider value={surroundings}>{children}</Entry.Provider>;
}

/** Key of the answer: whoever hears that something was projected invalidates it. */
export const blocksKey = (entryId: string) => ['entry', entryId, 'blocks'] as const;

/** Open pages are told when something was projected; this is for a line that breaks at that very moment. */
const ASK_AGAIN_MS = 3_000;

export interface BlockNow extends Surroundings {
  /** What the server says; it may be about earlier settings (phase "updating"). */
  readonly block: BlockState | null;
  readonly phase: BlockPhase;
  /** Readings of this entry that a block can name. */
  readonly available: readonly AvailableReading[];
  /** Why nothing is known yet, as a sentence. */
  readonly error: string | null;
  readonly askAgain: () => void;
}

/** What is known of the block with these attributes. */
export function useBlock(attributes: BlockAttributes): BlockNow {
  const surroundings = useContext(Entry);
  if (surroundings === null) throw new Error('a diffusion block needs a BlocksProvider around it');
  const { entryId } = surroundings;
  const { data, error, refetch } = useQuery({
    queryKey: blocksKey(entryId),
    queryFn: ({ signal }) => fetchJson(`/api/entries/${entryId}/blocks`, blockAnswer, { signal }),
    refetchInterval: ({ state }) => {
      const known = state.data ? findBlock(state.data.blocks, attributes) : null;
      const phase = phaseOf(known, attributes);
      return phase === 'waiting' || phase === 'updating' ? ASK_AGAIN_MS : false;
    },
  });
  const block = data ? findBlock(data.blocks, attributes) : null;
  return {
    ...surroundings,
    block,
    phase: phaseOf(block, attributes),
    available: data?.available ?? [],
    // While something is known, it stays: the page says elsewhere that the connection is gone.
    error: data ? null : (error?.message ?? null),
    askAgain: () => void refetch(),
  };
}
