'use client';

import { useState, type FormEvent, type ReactNode, type RefObject } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import { Notice } from '@/components/ui/notice';
import { PasswordField } from './password-field';
import { useAct, type Act } from './use-act';

/** What the forms of a profile have in common: faults above, the button below, and a word when it is done. */
function ProfileForm({
  form,
  fault,
  done,
  busy,
  verb,
  onSubmit,
  children,
}: {
  form: RefObject<HTMLFormElement | null>;
  fault: string | null;
  done: string | null;
  busy: boolean;
  verb: string;
  onSubmit: () => void;
  children: ReactNode;
}) {
  return (
    <form
      ref={form}
      noValidate
      className="space-y-4"
      onSubmit={(event: FormEvent) => {
        event.preventDefault();
        onSubmit();
      }}
    >
      {fault ? <Notice kind="error">{fault}</Notice> : null}
      {children}
      <div className="flex flex-wrap items-center gap-4">
        <Button type="submit" busy={busy}>
          {verb}
        </Button>
        <p role="status" className="small text-malachite">
          {done}
        </p>
      </div>
    </form>
  );
}

export function NameForm({ name, change }: { name: string; change: Act<{ name: string }> }) {
  const [typed, setTyped] = useState(name);
  const [done, setDone] = useState<string | null>(null);
  const { run, fields, ...rest } = useAct();
  return (
    <ProfileForm
      {...rest}
      done={done}
      verb="Change the name"
      onSubmit={() => {
        setDone(null);
        run(change, { name: typed }, () => setDone('Changed.'));
      }}
    >
      <Field
        label="Name"
        hint="Printed under what you write and sign from now on; what is signed keeps its name."
        error={fields.name}
      >
        {(control) => (
          <Input
            {...control}
            autoComplete="name"
            value={typed}
            onChange={(event) => setTyped(event.target.value)}
          />
        )}
      </Field>
    </ProfileForm>
  );
}

export function EmailForm({
  email,
  change,
}: {
  email: string;
  change: Act<{ email: string; current: string }>;
}) {
  const [typed, setTyped] = useState(email);
  const [current, setCurrent] = useState('');
  const [done, setDone] = useState<string | null>(null);
  const { run, fields, ...rest } = useAct();
  return (
    <ProfileForm
      {...rest}
      done={done}
      verb="Change the address"
      onSubmit={() => {
        setDone(null);
        run(change, { email: typed, current }, () => {
          setCurrent('');
          setDone('Changed. Both addresses are told.');
        });
      }}
    >
      <Field label="E-mail" error={fields.email}>
        {(control) => (
          <Input
            {...control}
            type="email"
            autoComplete="email"
            value={typed}
            onChange={(event) => setTyped(event.target.value)}
          />
        )}
      </Field>
      <PasswordField
        label="Present password, to change the address"
        value={current}
        onChange={setCurrent}
        error={fields.current}
      />
    </ProfileForm>
  );
}

export function ChangePasswordForm({ change }: { change: Act<{ current: string; password: string }> }) {
  const [current, setCurrent] = useState('');
  const [password, setPassword] = useState('');
  const [done, setDone] = useState<string | null>(null);
  const { run, fields, ...rest } = useAct();
  return (
    <ProfileForm
      {...rest}
      done={done}
      verb="Change the password"
      onSubmit={() => {
        setDone(null);
        run(change, { current, password }, () => {
          setCurrent('');
          setPassword('');
          setDone('Changed. All your other logins are ended.');
        });
      }}
    >
      <PasswordField label="Present password" value={current} onChange={setCurrent} error={fields.current} />
      <PasswordField
        label="New password"
        value={password}
        onChange={setPassword}
        error={fields.password}
        isNew
      />
    </ProfileForm>
  );
}

export function EndOthers({ end }: { end: Act<Record<string, never>, { ended: number }> }) {
  const { run, busy, fault } = useAct();
  return (
    <div className="mt-4">
      {fault ? <Notice kind="error">{fault}</Notice> : null}
      <Button busy={busy} onClick={() => run(end, {}, () => undefined)}>
        End all others
      </Button>
    </div>
  );
}
