'use client';

import { useMemo, useState } from 'react';
import type { AnalysisResult } from '@/analysis/types';
import { LazyChart } from '@/components/charts/lazy-chart';
import { msdSummary } from '@/components/charts/msd-rows';
import { MSD_HEIGHT_PIXELS, msdSpec, type MsdScale } from '@/components/charts/msd-spec';
import { classes } from '@/components/ui/classes';
import { MsdTable } from './msd-table';

/** Room that the figure takes on the page, for whoever keeps it free. */
export const MSD_FIGURE_HEIGHT_CLASS = 'h-[360px]';

const SCALES: readonly { readonly scale: MsdScale; readonly word: string }[] = [
  { scale: 'linear', word: 'linear' },
  { scale: 'log', word: 'logarithmic' },
];

/** The MSD curve at the column's width, its scale in quiet words above, its numbers in a table below. */
export function MsdFigure({ result }: { result: AnalysisResult }) {
  const [scale, setScale] = useState<MsdScale>('linear');
  const spec = useMemo(() => msdSpec(result, scale), [result, scale]);
  const summary = useMemo(() => msdSummary(result), [result]);
  return (
    <div className="mt-3">
      <div role="group" aria-label="Scale of the axes" className="label -ml-2 flex gap-1 print:hidden">
        {SCALES.map((one) => (
          <button
            key={one.scale}
            type="button"
            aria-pressed={scale === one.scale}
            onClick={() => setScale(one.scale)}
            className={classes(
              'min-h-7 px-2 underline-offset-4 max-desk:min-h-11 pointer-coarse:min-h-11',
              scale === one.scale ? 'text-malachite underline decoration-2' : 'text-muted hover:text-ink',
            )}
          >
            {one.word}
          </button>
        ))}
      </div>
      <LazyChart spec={spec} label={summary} heightPixels={MSD_HEIGHT_PIXELS} />
      <MsdTable result={result} summary={summary} />
    </div>
  );
}
