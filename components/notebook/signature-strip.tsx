import { stateWords, type EntryState } from './state-words';

/** The ruled strip at the foot of the page: what state it is in, and who began it when. */
export function SignatureStrip({
  state,
  startedBy,
  startedAt,
  timeZone,
}: {
  state: EntryState;
  startedBy: string;
  /** In words and in the lab's time zone. */
  startedAt: string;
  timeZone: string;
}) {
  return (
    <footer className="label mt-auto grid gap-x-8 gap-y-1 border-t-2 border-ink/70 pt-3 text-muted tab:grid-cols-[auto_1fr]">
      <p className="font-semibold text-ink first-letter:uppercase">{stateWords[state]}</p>
      <p className="tab:text-right">
        Begun by {startedBy} on {startedAt} ({timeZone.replaceAll('_', ' ')}).
        {state === 'draft' ? ' Not signed.' : ''}
      </p>
    </footer>
  );
}
