'use client';

import { useState, type FormEvent } from 'react';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import { Notice } from '@/components/ui/notice';
import { Select } from '@/components/ui/select';
import { useAct, type Act } from './use-act';

export interface Invitation {
  name: string;
  email: string;
  login: string;
  role: 'pi' | 'researcher' | 'guest';
  admin: boolean;
  notebookId: string | null;
  memberRole: 'editor' | 'reader' | 'witness';
}

const nothing: Invitation = {
  ...{ name: '', email: '', login: '', role: 'researcher', admin: false },
  ...{ notebookId: null, memberRole: 'editor' },
};

/** The way to a new account. What was typed stays until the invitation is made, also when the dialog is closed between. */
export function InvitePerson({
  invite,
  asAdmin,
  notebooks,
}: {
  invite: Act<Invitation, { personId: string }>;
  /** An administrator invites anybody; a PI invites to a notebook of their own. */
  asAdmin: boolean;
  notebooks: readonly { id: string; code: string; title: string }[];
}) {
  const [open, setOpen] = useState(false);
  const first = asAdmin ? null : (notebooks[0]?.id ?? null);
  const [typed, setTyped] = useState<Invitation>({ ...nothing, notebookId: first });
  const [done, setDone] = useState<string | null>(null);
  const { run, busy, fields, fault, form } = useAct();
  const set = (change: Partial<Invitation>) => setTyped((before) => ({ ...before, ...change }));

  function submit(event: FormEvent): void {
    event.preventDefault();
    const guest = typed.role === 'guest' ? { memberRole: 'reader' as const, admin: false } : {};
    run(invite, { ...typed, ...guest }, () => {
      setDone(`${typed.name} is invited. The mail goes to ${typed.email}.`);
      setTyped({ ...nothing, notebookId: first });
      setOpen(false);
    });
  }

  return (
    <div className="flex flex-wrap items-center gap-4">
      <p role="status" className="small text-malachite">
        {done}
      </p>
      <Button onClick={() => setOpen(true)}>Invite a person</Button>
      <Dialog
        open={open}
        onOpenChange={setOpen}
        title="Invite a person"
        description="They get a mail with a link, valid for seven days, to choose a password. Nobody else ever sees it."
      >
        <form ref={form} noValidate onSubmit={submit} className="space-y-5">
          {fault ? <Notice kind="error">{fault}</Notice> : null}
          <Field label="Name" hint="As it is printed under what they write and sign." error={fields.name}>
            {(control) => (
              <Input
                {...control}
                value={typed.name}
                autoComplete="off"
                onChange={(event) => set({ name: event.target.value })}
              />
            )}
          </Field>
          <Field label="E-mail" error={fields.email}>
            {(control) => (
              <Input
                {...control}
                type="email"
                value={typed.email}
                autoComplete="off"
                onChange={(event) => set({ email: event.target.value })}
              />
            )}
          </Field>
          <Field
            label="Login name"
            hint="A short name to sign in with. It never changes and is never given to anybody else."
            error={fields.login}
          >
            {(control) => (
              <Input
                {...control}
                value={typed.login}
                autoComplete="off"
                autoCapitalize="none"
                spellCheck={false}
                onChange={(event) => set({ login: event.target.value })}
              />
            )}
          </Field>
          <Field label="Role" error={fields.role}>
            {(control) => (
              <Select
                {...control}
                value={typed.role}
                onChange={(event) => set({ role: event.target.value as Invitation['role'] })}
              >
                {asAdmin ? <option value="pi">PI</option> : null}
                <option value="researcher">Researcher</option>
                <option value="guest">Guest, who only reads</option>
              </Select>
            )}
          </Field>
          {asAdmin && typed.role !== 'guest' ? (
            <label className="small flex min-h-9 items-center gap-3 max-desk:min-h-11">
              <input
                type="checkbox"
                className="size-4 accent-malachite"
                checked={typed.admin}
                onChange={(event) => set({ admin: event.target.checked })}
              />
              Also an administrator
            </label>
          ) : null}
          {fields.admin ? <p className="label text-madder">{fields.admin}</p> : null}
          {notebooks.length > 0 ? (
            <>
              <Field label="Notebook" error={fields.notebookId}>
                {(control) => (
                  <Select
                    {...control}
                    value={typed.notebookId ?? ''}
                    onChange={(event) => set({ notebookId: event.target.value || null })}
                  >
                    {asAdmin ? <option value="">None yet</option> : null}
                    {notebooks.map((one) => (
                      <option key={one.id} value={one.id}>
                        {one.code}, {one.title}
                      </option>
                    ))}
                  </Select>
                )}
              </Field>
              {typed.notebookId && typed.role !== 'guest' ? (
                <Field label="In this notebook" error={fields.memberRole}>
                  {(control) => (
                    <Select
                      {...control}
                      value={typed.memberRole}
                      onChange={(event) =>
                        set({ memberRole: event.target.value as Invitation['memberRole'] })
                      }
                    >
                      <option value="editor">Editor, who writes</option>
                      <option value="reader">Reader</option>
                      <option value="witness">Witness, who countersigns</option>
                    </Select>
                  )}
                </Field>
              ) : null}
            </>
          ) : null}
          <div className="flex justify-end">
            <Button type="submit" weight="primary" busy={busy}>
              {busy ? 'Inviting …' : 'Send the invitation'}
            </Button>
          </div>
        </form>
      </Dialog>
    </div>
  );
}
