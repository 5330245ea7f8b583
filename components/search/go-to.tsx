'use client';

import { useRouter } from 'next/navigation';
import { useEffect, useId, useRef, useState, type KeyboardEvent } from 'react';
import { fetchJson } from '@/components/fetch-json';
import { Dialog } from '@/components/ui/dialog';
import { Input } from '@/components/ui/input';
import { formatDay } from '@/components/ui/format-date';
import { goToAnswer, type GoToAnswer } from '@/db/inputs/search';

interface Goal {
  readonly href: string;
  readonly kind: string;
  readonly words: string;
  readonly note: string;
}

/** After this pause in typing the server is asked. */
const PAUSE_MS = 120;

/** A few letters, a number or a name, and there one is. Opens from `trigger`, or with Ctrl and the comma key. */
export function GoTo({ trigger }: { trigger: (open: () => void) => React.ReactNode }) {
  const [open, setOpen] = useState(false);
  useEffect(() => {
    const listen = (event: globalThis.KeyboardEvent) => {
      if (event.key !== ',' || !(event.ctrlKey || event.metaKey) || event.altKey) return;
      event.preventDefault();
      setOpen(true);
    };
    window.addEventListener('keydown', listen);
    return () => window.removeEventListener('keydown', listen);
  }, []);
  return (
    <>
      {trigger(() => setOpen(true))}
      {open ? (
        <Dialog open onOpenChange={setOpen} title="Go to">
          <Finder onGone={() => setOpen(false)} />
        </Dialog>
      ) : null}
    </>
  );
}

function Finder({ onGone }: { onGone: () => void }) {
  const router = useRouter();
  const list = useId();
  const [typed, setTyped] = useState('');
  const [goals, setGoals] = useState<readonly Goal[]>([]);
  const [at, setAt] = useState(0);
  const [fault, setFault] = useState('');
  const current = useRef('');

  useEffect(() => {
    const words = typed.trim();
    current.current = words;
    const control = new AbortController();
    const timer = setTimeout(() => {
      if (words === '') return setGoals([]);
      fetchJson(`/api/go-to?${new URLSearchParams({ q: words })}`, goToAnswer, { signal: control.signal })
        .then((answer) => {
          if (current.current !== words) return;
          setGoals(goalsOf(answer, words));
          setAt(0);
          setFault('');
        })
        .catch((error: Error) => {
          if (!control.signal.aborted) setFault(error.message);
        });
    }, PAUSE_MS);
    return () => {
      clearTimeout(timer);
      control.abort();
    };
  }, [typed]);

  const go = (goal: Goal | undefined) => {
    if (!goal) return;
    onGone();
    router.push(goal.href);
  };
  const onKeyDown = (event: KeyboardEvent) => {
    const step = event.key === 'ArrowDown' ? 1 : event.key === 'ArrowUp' ? -1 : 0;
    if (step !== 0 && goals.length > 0) {
      event.preventDefault();
      setAt((at + step + goals.length) % goals.length);
    }
    if (event.key === 'Enter') go(goals[at]);
  };

  return (
    <>
      <Input
        role="combobox"
        aria-label="Number, title, notebook or person"
        aria-expanded={goals.length > 0}
        aria-controls={list}
        aria-activedescendant={goals[at] ? `${list}-${at}` : undefined}
        autoFocus
        autoComplete="off"
        placeholder="TRB 3, a title, a name"
        value={typed}
        onChange={({ target }) => setTyped(target.value)}
        onKeyDown={onKeyDown}
        className="w-full"
      />
      <ul id={list} role="listbox" aria-label="Places" className="mt-3 min-h-24">
        {goals.map((goal, i) => (
          <li
            key={goal.href}
            id={`${list}-${i}`}
            role="option"
            aria-selected={i === at}
            onPointerMove={() => setAt(i)}
            onClick={() => go(goal)}
            className={`flex min-h-9 cursor-pointer items-baseline gap-3 border-l-2 px-3 py-1.5 max-desk:min-h-11 ${i === at ? 'border-malachite bg-paper' : 'border-transparent'}`}
          >
            <span className="label w-20 shrink-0 text-muted">{goal.kind}</span>
            <span className="min-w-0 grow truncate">{goal.words}</span>
            <span className="label shrink-0 text-muted max-tab:hidden">{goal.note}</span>
          </li>
        ))}
      </ul>
      <p role="status" className="label mt-2 text-muted">
        {fault ||
          (typed.trim() === ''
            ? 'Arrow keys choose, Enter goes there.'
            : goals.length === 0
              ? 'Looking …'
              : '')}
      </p>
    </>
  );
}

function goalsOf({ entries, notebooks, people }: GoToAnswer, words: string): Goal[] {
  return [
    ...entries.map((one) => ({
      href: `/entries/${one.id}`,
      kind: `${one.code} ${one.number}`,
      words: one.title || 'Untitled',
      note: formatDay(one.date, 'short'),
    })),
    ...notebooks.map((one) => ({
      href: `/notebooks/${one.id}`,
      kind: one.code,
      words: one.title,
      note: 'notebook',
    })),
    ...people.map((one) => ({
      href: `/search?${new URLSearchParams({ by: one.id })}`,
      kind: 'person',
      words: one.name,
      note: 'their entries',
    })),
    {
      href: `/search?${new URLSearchParams({ q: words })}`,
      kind: 'search',
      words: `“${words}” in all texts`,
      note: '',
    },
  ];
}
