'use client';

import { useState } from 'react';
import type { AnalysisResult } from '@/analysis/types';
import type { BlockViewProps } from '@/editor/views/block-renderer';
import { useBlock } from './blocks-context';
import { BlockMessage, Progress, spoilsResult } from './block-message';
import { Caption } from './caption';
import { MSD_FIGURE_HEIGHT_CLASS } from './msd-figure';
import { Provenance } from './provenance';
import { ResultView } from './result-view';
import { SettingsFold } from './settings-fold';

/** A diffusion block on the page, like a figure in a paper: a rule above and below, number and caption, the result. */
export function DiffusionBlockView({ attributes, faulty = [], update, remove, editable }: BlockViewProps) {
  const now = useBlock(attributes);
  const { block, phase } = now;
  // A block with unusable settings has no result, whatever the rest of it would give.
  const blocked = faulty.some(spoilsResult);
  const current = phase === 'done' && !blocked ? (block?.result ?? null) : null;
  const last = useLast(current);
  const waiting = (phase === 'updating' || phase === 'waiting') && !blocked;
  const held = phase === 'waiting' && block?.message !== '';
  const shown = current ?? (waiting ? last : null);
  return (
    <figure data-block-status={now.error ? 'error' : phase} className="border-y py-4 font-serif">
      <figcaption className="mb-2 flex items-start gap-x-3 leading-6">
        <span className="label shrink-0 leading-6! font-semibold text-muted">
          Block {block?.position ?? '–'}
        </span>
        <span className="min-w-0 grow">
          <Caption
            value={attributes.caption}
            editable={editable}
            onChange={(caption) => update({ caption })}
          />
        </span>
        {waiting && !held ? <Progress hasNumbers={shown !== null} /> : null}
      </figcaption>
      <BlockMessage now={now} faulty={faulty} editable={editable} update={update} />
      {shown ? <ResultView result={shown} outdated={shown !== current} /> : null}
      {waiting && !held && !shown ? <Reserved /> : null}
      <SettingsFold
        attributes={attributes}
        now={now}
        result={current}
        editable={editable}
        update={update}
        remove={remove}
      />
      {block && phase !== 'empty' ? (
        <Provenance block={block} result={current} timeZone={now.timeZone} />
      ) : null}
    </figure>
  );
}

/** The last result that was there, so that numbers do not vanish while new ones are computed. */
function useLast(current: AnalysisResult | null): AnalysisResult | null {
  const [last, setLast] = useState(current);
  if (current !== null && current !== last) setLast(current);
  return current ?? last;
}

/** Keeps the room of a first result while it is being computed, so that the text below stays where it is. */
function Reserved() {
  return (
    <div aria-hidden className="print:hidden">
      <div className="h-24 space-y-4 pt-3">
        <div className="h-6 w-2/3 animate-pulse rounded-sm bg-rule" />
        <div className="h-3 w-11/12 animate-pulse rounded-sm bg-rule" />
      </div>
      <div className={MSD_FIGURE_HEIGHT_CLASS} />
    </div>
  );
}
