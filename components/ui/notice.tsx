import type { ReactNode } from 'react';
import { classes } from './classes';

type Kind = 'information' | 'attention' | 'error' | 'done';

const bar: Record<Kind, string> = {
  information: 'border-l-cobalt',
  attention: 'border-l-ochre',
  error: 'border-l-madder',
  done: 'border-l-malachite',
};
const word: Record<Kind, { text: string; colour: string } | null> = {
  information: null,
  attention: { text: 'Please note', colour: 'text-ochre' },
  error: { text: 'This did not work', colour: 'text-madder' },
  done: null,
};

/**
 * A remark in the page: what happened, what is safe, what to do. Kind is told by a word and a rule at its side, never by
 * colour alone. Errors interrupt a screen reader, the others wait their turn.
 */
export function Notice({
  kind = 'information',
  title,
  children,
  action,
  className,
}: {
  kind?: Kind;
  /** Replaces the kind's own word. */
  title?: string;
  children: ReactNode;
  action?: ReactNode;
  className?: string;
}) {
  const heading = title ?? word[kind]?.text;
  return (
    <div
      role={kind === 'error' ? 'alert' : 'status'}
      className={classes('border-l-2 py-1 pl-4 small', bar[kind], className)}
    >
      {heading ? <p className={classes('font-semibold', word[kind]?.colour)}>{heading}</p> : null}
      <div className="max-w-measure text-ink">{children}</div>
      {action ? <div className="mt-2">{action}</div> : null}
    </div>
  );
}
