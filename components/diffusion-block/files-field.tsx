'use client';

import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { Select } from '@/components/ui/select';
import { VisuallyHidden } from '@/components/ui/visually-hidden';
import { MAX_READINGS_PER_BLOCK, type BlockAttributes } from '@/db/inputs/block-settings';
import type { BlockNow } from './blocks-context';

/** The files of a block: several are one ensemble. Each can be taken out; others of this entry can be put in. */
export function FilesField({
  block,
  now,
  editable,
  update,
}: {
  block: BlockAttributes;
  now: BlockNow;
  editable: boolean;
  update: (change: Partial<BlockAttributes>) => void;
}) {
  const files = block.readingIds.map((id) => ({ id, known: now.available.find((one) => one.id === id) }));
  const used = new Set(files.map((one) => one.known?.sha256));
  // The same file in another reading would count its tracks twice; the newest reading of a file is the one to offer.
  const offered = [...new Map(now.available.map((one) => [one.sha256, one])).values()].filter(
    (one) => !used.has(one.sha256),
  );
  const takeOut = (at: number) => update(withoutFile(block, at));
  return (
    <div className="col-span-full space-y-2">
      {files.length > 0 ? (
        <ul className="label">
          {files.map(({ id, known }, at) => (
            <li key={`${id} ${at}`} className="flex items-center justify-between gap-3 border-b py-1">
              <span className="min-w-0 break-words">
                {known ? known.name : <span className="text-madder">▲ not a file of this entry</span>}
              </span>
              {editable ? (
                <Button size="small" weight="quiet" onClick={() => takeOut(at)}>
                  <span>
                    Take out
                    <VisuallyHidden> of the block: {known?.name ?? 'this file'}</VisuallyHidden>
                  </span>
                </Button>
              ) : null}
            </li>
          ))}
        </ul>
      ) : null}
      {editable && offered.length > 0 && files.length < MAX_READINGS_PER_BLOCK ? (
        <Field
          label={files.length === 0 ? 'File' : 'Put another file in'}
          hint={files.length === 0 ? undefined : 'All files of a block are analysed as one ensemble.'}
          className="max-w-80"
        >
          {(control) => (
            <Select
              {...control}
              value=""
              onChange={({ target }) => {
                if (target.value) update({ readingIds: [...block.readingIds, target.value] });
              }}
            >
              <option value="">choose a file of this entry</option>
              {offered.map((one) => (
                <option key={one.id} value={one.id}>
                  {one.name}
                </option>
              ))}
            </Select>
          )}
        </Field>
      ) : null}
      {files.length === 0 && offered.length === 0 ? (
        <p className="label text-muted">No file of this entry has been read yet.</p>
      ) : null}
    </div>
  );
}

/** Tracks that were left out are named by the place of their file, so they move with it. */
export function withoutFile(block: BlockAttributes, at: number): Partial<BlockAttributes> {
  const readingIds = block.readingIds.filter((_, index) => index !== at);
  if (block.excludedTracks.length === 0) return { readingIds };
  const excludedTracks = block.excludedTracks
    .filter((one) => one.reading !== at)
    .map((one) => (one.reading > at ? { ...one, reading: one.reading - 1 } : one));
  return { readingIds, excludedTracks };
}
