'use client';

import Link from 'next/link';
import { useState, type FormEvent } from 'react';
import { Button, buttonClasses } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PasswordField } from './password-field';
import { useAct, type Act } from './use-act';

/** Sets a password with the secret that stands behind "#" in the address; it is sent only when the form is. */
export function SetPasswordForm({
  setPassword,
}: {
  setPassword: Act<{ secret: string; password: string }, { login: string }>;
}) {
  const [password, setTyped] = useState('');
  const [login, setLogin] = useState<string | null>(null);
  const { run, busy, fields, fault, form } = useAct();

  function submit(event: FormEvent): void {
    event.preventDefault();
    const secret = location.hash.slice(1);
    run(setPassword, { secret, password }, (value) => {
      // The used secret has no business in the history of the browser.
      history.replaceState(null, '', location.pathname);
      setLogin(value.login);
    });
  }

  if (login !== null) {
    return (
      <Notice
        kind="done"
        title="The password is set"
        action={
          <Link href="/sign-in" className={buttonClasses('primary')}>
            Sign in
          </Link>
        }
      >
        Your login name is {login}. You can sign in now.
      </Notice>
    );
  }
  return (
    <form ref={form} noValidate onSubmit={submit} className="space-y-5">
      {fault || fields.secret ? (
        <Notice
          kind="error"
          action={
            <Link href="/forgotten" className="underline underline-offset-4">
              Ask for a new link
            </Link>
          }
        >
          {fault ?? fields.secret}
        </Notice>
      ) : null}
      <PasswordField
        label="New password"
        value={password}
        onChange={setTyped}
        error={fields.password}
        isNew
      />
      <Button type="submit" weight="primary" busy={busy}>
        {busy ? 'Setting it …' : 'Set the password'}
      </Button>
    </form>
  );
}
