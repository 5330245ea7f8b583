'use client';

import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { useAct, type Act } from './use-act';

export interface ShownLogin {
  readonly id: string;
  readonly browser: string;
  readonly started: string;
  readonly seen: string;
  readonly own: boolean;
}

/** Where somebody is signed in, each with a button to end it. */
export function LoginList({ logins, end }: { logins: readonly ShownLogin[]; end: Act<{ loginId: string }> }) {
  const { run, busy, fault } = useAct();
  if (logins.length === 0) return <p className="small text-muted">Not signed in anywhere.</p>;
  return (
    <>
      {fault ? <Notice kind="error">{fault}</Notice> : null}
      <ul className="divide-y border-y">
        {logins.map((login) => (
          <li key={login.id} className="flex flex-wrap items-center justify-between gap-x-6 gap-y-1 py-2">
            <div>
              <p className="small">
                {login.browser}
                {login.own ? ' (this one)' : ''}
              </p>
              <p className="label text-muted">
                Signed in {login.started}, last seen {login.seen}
              </p>
            </div>
            {login.own ? null : (
              <Button
                size="small"
                busy={busy}
                aria-label={`End the login of ${login.browser}, last seen ${login.seen}`}
                onClick={() => run(end, { loginId: login.id }, () => undefined)}
              >
                End
              </Button>
            )}
          </li>
        ))}
      </ul>
    </>
  );
}
