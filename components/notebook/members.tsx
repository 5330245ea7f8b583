'use client';

import { useState, type FormEvent } from 'react';
import { useAct, type Act } from '@/components/people/use-act';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import { Notice } from '@/components/ui/notice';
import { Select } from '@/components/ui/select';
import type { AddMemberInput, ChangeMemberInput } from '@/db/inputs/notebook';
import type { MemberRole } from '@/db/policies/may';
import type { Member } from '@/db/queries/notebook/list-members';

const ROLES: readonly (readonly [MemberRole, string])[] = [
  ['owner', 'owner'],
  ['editor', 'writes'],
  ['reader', 'reads'],
  ['witness', 'witnesses'],
];

/** Who belongs to a notebook, for its owners: add, change, remove. Folded, because it is rarely needed. */
export function Members({
  notebookId,
  members,
  add,
  change,
}: {
  notebookId: string;
  members: readonly Member[];
  add: Act<AddMemberInput>;
  change: Act<ChangeMemberInput>;
}) {
  return (
    <details className="mt-3">
      <summary className="label inline-flex min-h-7 cursor-pointer items-center text-malachite underline-offset-4 hover:underline max-desk:min-h-11">
        Change who belongs to it
      </summary>
      <ul className="mt-3 max-w-xl border-t">
        {members.map((member) => (
          <MemberRow key={member.personId} notebookId={notebookId} member={member} change={change} />
        ))}
      </ul>
      <AddMember notebookId={notebookId} add={add} />
    </details>
  );
}

function MemberRow({
  notebookId,
  member,
  change,
}: {
  notebookId: string;
  member: Member;
  change: Act<ChangeMemberInput>;
}) {
  const { run, busy, fields, fault } = useAct();
  const { personId, name, role, active } = member;
  return (
    <li className="border-b py-2">
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <span className="small min-w-0 grow">
          {name}
          {active ? null : <span className="text-muted">, account closed</span>}
        </span>
        <Select
          aria-label={`What ${name} does`}
          value={role}
          disabled={busy}
          onChange={({ target }) =>
            run(change, { notebookId, personId, role: target.value as MemberRole }, () => undefined)
          }
        >
          {ROLES.filter(([one]) => member.personRole !== 'guest' || one === 'reader' || one === role).map(
            ([one, words]) => (
              <option key={one} value={one}>
                {words}
              </option>
            ),
          )}
        </Select>
        <Button
          size="small"
          busy={busy}
          aria-label={`Remove ${name}`}
          onClick={() => run(change, { notebookId, personId, role: null }, () => undefined)}
        >
          Remove
        </Button>
      </div>
      {fault || fields.role ? (
        <p role="alert" className="label mt-1 text-madder">
          {fault ?? fields.role}
        </p>
      ) : null}
    </li>
  );
}

function AddMember({ notebookId, add }: { notebookId: string; add: Act<AddMemberInput> }) {
  const { run, busy, fields, fault, form } = useAct();
  const [who, setWho] = useState('');
  const [role, setRole] = useState<MemberRole>('editor');
  function submit(event: FormEvent): void {
    event.preventDefault();
    run(add, { notebookId, who, role }, () => setWho(''));
  }
  return (
    <form ref={form} noValidate onSubmit={submit} className="mt-4 max-w-xl space-y-3">
      {fault ? <Notice kind="error">{fault}</Notice> : null}
      <div className="grid items-start gap-4 tab:grid-cols-[1fr_9rem_auto]">
        <Field label="Add somebody" hint="Login name or e-mail address." error={fields.who}>
          {(control) => (
            <Input
              {...control}
              autoComplete="off"
              spellCheck={false}
              className="w-full"
              value={who}
              onChange={({ target }) => setWho(target.value)}
            />
          )}
        </Field>
        <Field label="who" error={fields.role}>
          {(control) => (
            <Select {...control} value={role} onChange={({ target }) => setRole(target.value as MemberRole)}>
              {ROLES.map(([one, words]) => (
                <option key={one} value={one}>
                  {words}
                </option>
              ))}
            </Select>
          )}
        </Field>
        <Button type="submit" busy={busy} className="tab:mt-6">
          Add
        </Button>
      </div>
    </form>
  );
}
