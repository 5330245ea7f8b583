'use client';

import { useId, useState } from 'react';
import type { AnalysisResult } from '@/analysis/types';
import { Button } from '@/components/ui/button';
import type { BlockAttributes } from '@/db/inputs/block-settings';
import type { BlockNow } from './blocks-context';
import { describeSettings } from './describe-settings';
import { SettingsForm } from './settings-form';

/** The settings in one sentence that opens in place into the form. */
export function SettingsFold({
  attributes,
  now,
  result,
  editable,
  update,
  remove,
}: {
  attributes: BlockAttributes;
  now: BlockNow;
  /** The result of exactly these settings; null while there is none. */
  result: AnalysisResult | null;
  editable: boolean;
  update: (change: Partial<BlockAttributes>) => void;
  remove: () => void;
}) {
  // Nothing to look at yet, so the first step lies open.
  const [open, setOpen] = useState(editable && attributes.readingIds.length === 0);
  const panel = useId();
  const sentence = describeSettings(attributes, result);
  return (
    <>
      <button
        type="button"
        aria-expanded={open}
        aria-controls={panel}
        onClick={() => setOpen(!open)}
        className="label mt-3 min-h-7 text-left text-muted underline decoration-rule underline-offset-4 hover:text-ink hover:decoration-current max-desk:min-h-11 pointer-coarse:min-h-11 print:min-h-0! print:no-underline"
      >
        <span className="sr-only">Settings: </span>
        {sentence}
      </button>
      <div id={panel} hidden={!open} className="print:hidden">
        {open ? (
          <>
            <SettingsForm block={attributes} now={now} editable={editable} update={update} />
            {editable ? (
              <div className="mt-4 flex justify-end">
                <Button size="small" onClick={remove}>
                  Remove this block
                </Button>
              </div>
            ) : null}
          </>
        ) : null}
      </div>
    </>
  );
}
