'use client';

import type { ReactElement, ReactNode } from 'react';
import * as Radix from 'radix-ui/dropdown-menu';

const item =
  'small flex min-h-8 cursor-default items-center justify-between gap-6 rounded-sm px-3 text-ink select-none ' +
  'max-desk:min-h-11 pointer-coarse:min-h-11 data-highlighted:bg-paper data-highlighted:outline-none ' +
  'data-disabled:text-muted';

/** A list of acts that opens at a button (`trigger`, one element that takes a ref and props). */
export function Menu({
  trigger,
  align = 'start',
  side = 'bottom',
  children,
}: {
  trigger: ReactElement;
  align?: 'start' | 'center' | 'end';
  side?: 'top' | 'right' | 'bottom';
  children: ReactNode;
}) {
  return (
    <Radix.Root modal={false}>
      <Radix.Trigger asChild>{trigger}</Radix.Trigger>
      <Radix.Portal>
        <Radix.Content
          align={align}
          side={side}
          sideOffset={6}
          collisionPadding={8}
          className="z-50 min-w-52 rounded-md border bg-page p-1 shadow-float"
        >
          {children}
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}

export function MenuItem({
  onSelect,
  disabled,
  children,
}: {
  onSelect: () => void;
  disabled?: boolean;
  children: ReactNode;
}) {
  return (
    <Radix.Item className={item} onSelect={onSelect} disabled={disabled}>
      {children}
    </Radix.Item>
  );
}

/** One of several: the chosen one carries a dot. */
export function MenuChoice<T extends string>({
  label,
  value,
  choices,
  onChange,
}: {
  label: string;
  value: T;
  choices: readonly { value: T; label: string }[];
  onChange: (value: T) => void;
}) {
  return (
    <>
      <Radix.Label className="label px-3 pt-2 pb-1 text-muted">{label}</Radix.Label>
      <Radix.RadioGroup value={value} onValueChange={(next) => onChange(next as T)}>
        {choices.map((choice) => (
          <Radix.RadioItem
            key={choice.value}
            value={choice.value}
            className={item}
            onSelect={(event) => event.preventDefault()}
          >
            {choice.label}
            <Radix.ItemIndicator>
              <svg aria-hidden viewBox="0 0 8 8" className="size-2 fill-malachite">
                <circle cx="4" cy="4" r="3" />
              </svg>
            </Radix.ItemIndicator>
          </Radix.RadioItem>
        ))}
      </Radix.RadioGroup>
    </>
  );
}

export function MenuNote({ children }: { children: ReactNode }) {
  return <Radix.Label className="label block px-3 py-2 text-muted">{children}</Radix.Label>;
}

export function MenuRule() {
  return <Radix.Separator className="my-1 border-t" />;
}
