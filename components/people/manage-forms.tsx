'use client';

import { useState, type FormEvent } from 'react';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import { Notice } from '@/components/ui/notice';
import { Select } from '@/components/ui/select';
import type { PersonRole } from '@/db/policies/may';
import { useAct, type Act } from './use-act';

export function SendLink({
  personId,
  invited,
  send,
}: {
  personId: string;
  invited: boolean;
  send: Act<{ personId: string }>;
}) {
  const { run, busy, fault } = useAct();
  const [done, setDone] = useState(false);
  return (
    <div className="space-y-2">
      <Button busy={busy} onClick={() => run(send, { personId }, () => setDone(true))}>
        {invited ? 'Send the invitation again' : 'Send a link for a new password'}
      </Button>
      {fault ? <Notice kind="error">{fault}</Notice> : null}
      <p role="status" className="label text-malachite">
        {done ? 'The mail is on its way.' : ''}
      </p>
    </div>
  );
}

export function RoleForm({
  personId,
  role,
  admin,
  change,
}: {
  personId: string;
  role: PersonRole;
  admin: boolean;
  change: Act<{ personId: string; role: PersonRole; admin: boolean }>;
}) {
  const [typed, setTyped] = useState({ role, admin });
  const [done, setDone] = useState<string | null>(null);
  const { run, busy, fields, fault, form } = useAct();
  function submit(event: FormEvent): void {
    event.preventDefault();
    setDone(null);
    run(change, { personId, ...typed }, () => setDone('Changed, at once.'));
  }
  return (
    <form ref={form} noValidate onSubmit={submit} className="space-y-4">
      {fault ? <Notice kind="error">{fault}</Notice> : null}
      <Field label="Role" error={fields.role}>
        {(control) => (
          <Select
            {...control}
            value={typed.role}
            onChange={(event) => setTyped({ ...typed, role: event.target.value as PersonRole })}
          >
            <option value="pi">PI</option>
            <option value="researcher">Researcher</option>
            <option value="guest">Guest, who only reads</option>
          </Select>
        )}
      </Field>
      <label className="small flex min-h-9 items-center gap-3 max-desk:min-h-11">
        <input
          type="checkbox"
          className="size-4 accent-malachite"
          checked={typed.admin}
          onChange={(event) => setTyped({ ...typed, admin: event.target.checked })}
        />
        Administrator
      </label>
      {fields.admin ? (
        <p role="alert" className="label text-madder">
          {fields.admin}
        </p>
      ) : null}
      <div className="flex flex-wrap items-center gap-4">
        <Button type="submit" busy={busy}>
          Change the role
        </Button>
        <p role="status" className="small text-malachite">
          {done}
        </p>
      </div>
    </form>
  );
}

export function HandOverForm({
  personId,
  heirs,
  handOver,
}: {
  personId: string;
  heirs: readonly { id: string; name: string }[];
  handOver: Act<{ personId: string; toPersonId: string }, { notebooks: number }>;
}) {
  const [to, setTo] = useState('');
  const { run, busy, fields, fault, form } = useAct();
  function submit(event: FormEvent): void {
    event.preventDefault();
    run(handOver, { personId, toPersonId: to }, () => setTo(''));
  }
  return (
    <form ref={form} noValidate onSubmit={submit} className="mt-5 space-y-4">
      {fault ? <Notice kind="error">{fault}</Notice> : null}
      <Field
        label="Hand all owned notebooks over to"
        hint="They become their owner; the present owner stays a reader."
        error={fields.toPersonId}
      >
        {(control) => (
          <Select {...control} value={to} onChange={(event) => setTo(event.target.value)}>
            <option value="">Choose somebody</option>
            {heirs.map((heir) => (
              <option key={heir.id} value={heir.id}>
                {heir.name}
              </option>
            ))}
          </Select>
        )}
      </Field>
      <Button type="submit" busy={busy}>
        Hand over
      </Button>
    </form>
  );
}

/** Closing an account asks once more; opening it again does not. */
export function AccountForm({
  personId,
  active,
  close,
  open,
}: {
  personId: string;
  active: boolean;
  close: Act<{ personId: string; reason: string }>;
  open: Act<{ personId: string }>;
}) {
  const [asking, setAsking] = useState(false);
  const [reason, setReason] = useState('');
  const { run, busy, fields, fault, form } = useAct();
  if (!active) {
    return (
      <div className="space-y-3">
        {fault ? <Notice kind="error">{fault}</Notice> : null}
        <Button busy={busy} onClick={() => run(open, { personId }, () => undefined)}>
          Open the account again
        </Button>
      </div>
    );
  }
  return (
    <>
      <Button weight="danger" onClick={() => setAsking(true)}>
        Close the account
      </Button>
      <Dialog
        open={asking}
        onOpenChange={setAsking}
        title="Close this account?"
        description="All logins and open pages of this person end at once. Name, login name and everything written or signed stay."
      >
        <form
          ref={form}
          noValidate
          className="space-y-5"
          onSubmit={(event) => {
            event.preventDefault();
            run(close, { personId, reason }, () => setAsking(false));
          }}
        >
          {fault ? <Notice kind="error">{fault}</Notice> : null}
          <Field label="Reason" hint="Kept in the record. May stay empty." error={fields.reason}>
            {(control) => (
              <Input {...control} value={reason} onChange={(event) => setReason(event.target.value)} />
            )}
          </Field>
          <div className="flex justify-end">
            <Button type="submit" weight="danger" busy={busy}>
              Close the account
            </Button>
          </div>
        </form>
      </Dialog>
    </>
  );
}
