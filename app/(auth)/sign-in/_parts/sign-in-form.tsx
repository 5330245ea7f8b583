'use client';

import Link from 'next/link';
import { signIn } from 'next-auth/react';
import { useRef, useState, type FormEvent } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import { Notice } from '@/components/ui/notice';
import { ERRORS } from '@/db/errors';
import { DemoAccounts, type DemoOffer } from './demo-accounts';

type Faults = { name?: string; password?: string; form?: string };

/** Name and password; what is wrong stands beside the field, and what was typed stays. */
export function SignInForm({ returnPath, demo }: { returnPath: string; demo: DemoOffer | null }) {
  const [name, setName] = useState('');
  const [password, setPassword] = useState('');
  const [faults, setFaults] = useState<Faults>({});
  const [busy, setBusy] = useState(false);
  const nameInput = useRef<HTMLInputElement>(null);
  const passwordInput = useRef<HTMLInputElement>(null);
  const button = useRef<HTMLButtonElement>(null);

  function show(found: Faults): void {
    setFaults(found);
    (found.name ? nameInput : passwordInput).current?.focus();
  }

  async function submit(event: FormEvent): Promise<void> {
    event.preventDefault();
    const missing: Faults = {
      ...(name.trim() === '' ? { name: 'Enter your login name or e-mail address.' } : {}),
      ...(password === '' ? { password: 'Enter your password.' } : {}),
    };
    if (missing.name || missing.password) return show(missing);
    setBusy(true);
    setFaults({});
    const found = await trySignIn(name, password);
    // A full load: nothing of the signed-out page, and nothing of whoever was signed in before, stays in memory.
    if (!found) return location.assign(returnPath);
    setBusy(false);
    show(found);
  }

  return (
    <div>
      <form noValidate onSubmit={submit} aria-label="Sign in" className="space-y-5 border-t pt-6">
        {faults.form ? <Notice kind="error">{faults.form}</Notice> : null}
        <Field label="Login name or e-mail" error={faults.name}>
          {(control) => (
            <Input
              {...control}
              ref={nameInput}
              name="name"
              autoComplete="username"
              autoCapitalize="none"
              spellCheck={false}
              value={name}
              onChange={(event) => setName(event.target.value)}
            />
          )}
        </Field>
        <Field label="Password" error={faults.password}>
          {(control) => (
            <Input
              {...control}
              ref={passwordInput}
              name="password"
              type="password"
              autoComplete="current-password"
              value={password}
              onChange={(event) => setPassword(event.target.value)}
            />
          )}
        </Field>
        <Button ref={button} type="submit" weight="primary" busy={busy} className="w-full">
          {busy ? 'Signing in …' : 'Sign in'}
        </Button>
        <p className="label">
          <Link href="/forgotten" className="text-muted underline underline-offset-4 hover:text-ink">
            Forgotten your password?
          </Link>
        </p>
      </form>
      {demo ? (
        <DemoAccounts
          demo={demo}
          onPick={(login) => {
            setName(login);
            setPassword(demo.password);
            setFaults({});
            button.current?.focus();
          }}
        />
      ) : null}
    </div>
  );
}

/** @returns what is wrong, or null when signed in. */
async function trySignIn(name: string, password: string): Promise<Faults | null> {
  try {
    const answer = await signIn('credentials', { redirect: false, name, password });
    if (answer?.ok && !answer.error) return null;
    if (answer?.status === ERRORS['slow-down'].status)
      return { form: answer.error ?? ERRORS['slow-down'].sentence };
    if (answer?.status === ERRORS['sign-in-failed'].status)
      return { password: ERRORS['sign-in-failed'].sentence };
    return { form: `${ERRORS['storage-down'].sentence} What you typed is still here.` };
  } catch (error) {
    console.warn('sign-in could not be sent', error);
    return {
      form: 'The server cannot be reached. What you typed is still here; check the network and try again.',
    };
  }
}
