'use client';

import Link from 'next/link';
import { useState, type FormEvent } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import { Notice } from '@/components/ui/notice';
import { useAct, type Act } from './use-act';

/** Asks for a link by mail. The answer is the same whether or not anybody has this name. */
export function AskResetForm({ ask }: { ask: Act<{ name: string }> }) {
  const [name, setName] = useState('');
  const [asked, setAsked] = useState(false);
  const { run, busy, fields, fault, form } = useAct();

  function submit(event: FormEvent): void {
    event.preventDefault();
    run(ask, { name }, () => setAsked(true));
  }

  return (
    <form ref={form} noValidate onSubmit={submit} className="space-y-5">
      {fault ? <Notice kind="error">{fault}</Notice> : null}
      {asked ? (
        <Notice kind="done" title="Look into your mail">
          If somebody here has this name, a mail with a link is on its way to them. It works for thirty
          minutes.
        </Notice>
      ) : null}
      <Field
        label="Login name or e-mail"
        hint="We send a link to the address that your account has."
        error={fields.name}
      >
        {(control) => (
          <Input
            {...control}
            autoComplete="username"
            autoCapitalize="none"
            spellCheck={false}
            value={name}
            onChange={(event) => setName(event.target.value)}
          />
        )}
      </Field>
      <div className="flex flex-wrap items-center gap-6">
        <Button type="submit" weight="primary" busy={busy}>
          {busy ? 'Asking …' : 'Send me a link'}
        </Button>
        <Link href="/sign-in" className="small text-muted underline underline-offset-4 hover:text-ink">
          Back to signing in
        </Link>
      </div>
    </form>
  );
}
