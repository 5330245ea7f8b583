'use client';

import { classes } from '@/components/ui/classes';
import type { SavePhase } from '@/editor/collaboration';

const WORDS: Readonly<Record<SavePhase, string>> = {
  connecting: 'Connecting',
  saved: 'Saved',
  saving: 'Saving',
  offline: 'Offline, not saved yet',
  refused: 'Not saved',
  ended: 'Disconnected',
};

/** What is true of the text on this page: a word and a dot whose shape says the same. */
export function SaveMark({ phase, unsaved }: { phase: SavePhase; unsaved: boolean }) {
  const word = phase === 'offline' && !unsaved ? 'Offline' : WORDS[phase];
  const fine = phase === 'saved';
  const wrong = phase === 'refused' || phase === 'ended' || (phase === 'offline' && unsaved);
  return (
    <p
      role="status"
      aria-live="polite"
      className={classes('label inline-flex items-center gap-2', wrong ? 'text-madder' : 'text-muted')}
    >
      <svg aria-hidden viewBox="0 0 10 10" className="h-2.5 w-2.5 stroke-current" strokeWidth={1.5}>
        <circle
          cx={5}
          cy={5}
          r={3.5}
          fill={fine ? 'currentColor' : 'none'}
          strokeDasharray={fine || wrong ? undefined : '2 2'}
        />
        {wrong ? <path d="M1 9 L9 1" /> : null}
      </svg>
      <span>{word}</span>
    </p>
  );
}
