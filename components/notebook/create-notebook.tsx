'use client';

import { useRouter } from 'next/navigation';
import { useRef, useState, useTransition, type FormEvent } from 'react';
import { Button } from '@/components/ui/button';
import { controlClasses, classes } from '@/components/ui/classes';
import { Dialog } from '@/components/ui/dialog';
import { Field } from '@/components/ui/field';
import { Input } from '@/components/ui/input';
import { Notice } from '@/components/ui/notice';
import type { Refusal } from '@/db/errors';

export interface NewNotebook {
  code: string;
  title: string;
  description: string;
}

export type CreateAction = (
  input: NewNotebook,
) => Promise<{ ok: true; value: { notebookId: string } } | { ok: false; refusal: Refusal }>;

const nothing: NewNotebook = { code: '', title: '', description: '' };

/** The way to a new notebook. What was typed stays until the notebook is made, also when the dialog is closed between. */
export function CreateNotebook({ create, startOpen }: { create: CreateAction; startOpen: boolean }) {
  const router = useRouter();
  const [open, setOpen] = useState(startOpen);
  const [typed, setTyped] = useState(nothing);
  const [fields, setFields] = useState<Readonly<Record<string, string>>>({});
  const [fault, setFault] = useState<string | null>(null);
  const [pending, startTransition] = useTransition();
  const form = useRef<HTMLFormElement>(null);
  const set = (change: Partial<NewNotebook>) => setTyped((before) => ({ ...before, ...change }));

  function submit(event: FormEvent): void {
    event.preventDefault();
    startTransition(async () => {
      try {
        const outcome = await create(typed);
        if (outcome.ok) return router.push(`/notebooks/${outcome.value.notebookId}`);
        setFields(outcome.refusal.fields);
        requestAnimationFrame(() => form.current?.querySelector<HTMLElement>('[aria-invalid]')?.focus());
        setFault(Object.keys(outcome.refusal.fields).length > 0 ? null : outcome.refusal.sentence);
      } catch (error) {
        console.warn('the notebook could not be made', error);
        setFault(
          'The server cannot be reached. What you typed is still here; check the network and try again.',
        );
      }
    });
  }

  return (
    <>
      <Button onClick={() => setOpen(true)}>Make a notebook</Button>
      <Dialog
        open={open}
        onOpenChange={setOpen}
        title="A new notebook"
        description="You will own it. People are added to it by its owners."
      >
        <form ref={form} noValidate onSubmit={submit} className="space-y-5">
          {fault ? <Notice kind="error">{fault}</Notice> : null}
          <Field
            label="Code"
            hint="Two to six letters or digits. It starts the number of every entry, as in TRB 4, and never changes."
            error={fields.code}
          >
            {(control) => (
              <Input
                {...control}
                value={typed.code}
                maxLength={12}
                autoComplete="off"
                spellCheck={false}
                className="max-w-32 uppercase"
                onChange={(event) => set({ code: event.target.value })}
              />
            )}
          </Field>
          <Field label="Title" error={fields.title}>
            {(control) => (
              <Input
                {...control}
                value={typed.title}
                autoComplete="off"
                onChange={(event) => set({ title: event.target.value })}
              />
            )}
          </Field>
          <Field
            label="Description"
            hint="What is measured here, and why. May stay empty."
            error={fields.description}
          >
            {(control) => (
              <textarea
                {...control}
                rows={3}
                value={typed.description}
                className={classes(controlClasses, 'resize-y')}
                onChange={(event) => set({ description: event.target.value })}
              />
            )}
          </Field>
          <div className="flex justify-end">
            <Button type="submit" weight="primary" busy={pending}>
              {pending ? 'Making it …' : 'Make the notebook'}
            </Button>
          </div>
        </form>
      </Dialog>
    </>
  );
}
