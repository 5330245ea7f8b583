'use client';

import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { BLOCK_DEFAULTS, type BlockAttributes } from '@/db/inputs/block-settings';
import { BLOCK_WORDS } from '@/db/inputs/block-words';
import type { BlockNow } from './blocks-context';

type Update = (change: Partial<BlockAttributes>) => void;

/** Whether a result rests on this attribute; a caption or a name that cannot be used spoils no number. */
export function spoilsResult(name: keyof BlockAttributes): boolean {
  return name !== 'blockId' && name !== 'caption';
}

/** Quiet word at the caption's end while something is being computed; it moves nothing on the page. */
export function Progress({ hasNumbers }: { hasNumbers: boolean }) {
  return (
    <span role="status" className="label shrink-0 leading-6! text-muted print:hidden">
      {hasNumbers ? 'computing again …' : 'reading and computing …'}
    </span>
  );
}

/** What keeps a block from having a result, in words, with what to do about it. Nothing when all is well. */
export function BlockMessage({
  now,
  faulty,
  editable,
  update,
}: {
  now: BlockNow;
  faulty: readonly (keyof BlockAttributes)[];
  editable: boolean;
  update: Update;
}) {
  if (now.error) {
    return (
      <Notice
        kind="error"
        action={
          <Button size="small" onClick={now.askAgain}>
            Ask again
          </Button>
        }
      >
        {now.error}
      </Notice>
    );
  }
  const broken = faulty.filter(spoilsResult);
  if (broken.length > 0) return <Faulty names={broken} editable={editable} update={update} />;
  switch (now.phase) {
    case 'empty':
      return (
        <p className="small text-muted">
          {editable
            ? 'This block has no file yet. Choose one under the settings below, or drop a trajectory file on the page: it gets a block of its own.'
            : 'This block has no file yet.'}
        </p>
      );
    case 'failed':
      return (
        <Notice kind="attention" title="There is no result">
          {now.block?.message}
        </Notice>
      );
    case 'waiting':
      return now.block?.message ? <Notice>{now.block.message}</Notice> : null;
    case 'updating':
    case 'done':
      return null;
  }
}

/** Attributes that some other program wrote: named, and put right with one press. */
function Faulty({
  names,
  editable,
  update,
}: {
  names: readonly (keyof BlockAttributes)[];
  editable: boolean;
  update: Update;
}) {
  return (
    <Notice
      kind="attention"
      title="There is no result"
      action={
        editable ? (
          <Button
            size="small"
            onClick={() => update(Object.fromEntries(names.map((name) => [name, BLOCK_DEFAULTS[name]])))}
          >
            Set {names.length === 1 ? 'it' : 'them'} back
          </Button>
        ) : null
      }
    >
      What this block says about the following cannot be used:{' '}
      {names.map((name) => BLOCK_WORDS[name]).join(', ')}. The files are safe.
    </Notice>
  );
}
