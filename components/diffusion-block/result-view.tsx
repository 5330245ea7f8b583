'use client';

import type { AnalysisResult } from '@/analysis/types';
import { classes } from '@/components/ui/classes';
import { Quantity } from '@/components/ui/quantity';
import { VerdictMark } from '@/components/ui/verdict-glyph';
import { describeData, describeExclusions } from './describe-data';
import { MsdFigure } from './msd-figure';
import { RegimeLine } from './regime-line';
import { SizeLine } from './size-line';
import { WarningList } from './warning-list';

/** A computed result: headline, verdict, sentence, chart, what it rests on, what to look at. */
export function ResultView({ result, outdated }: { result: AnalysisResult; outdated: boolean }) {
  // The mark that says so is not dimmed: it has to be read.
  const dimmed = classes('transition-opacity', outdated && 'opacity-60');
  return (
    <div>
      <div className="flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1">
        <p>
          {outdated ? <span className="label mr-2 text-ochre">◇ of the earlier settings</span> : null}
          {result.D ? (
            <Quantity symbol="D" {...result.D} unit="µm²/s" size="headline" className={dimmed} />
          ) : result.K ? (
            <Quantity symbol="K" {...result.K} unit="µm²/s" power="α" size="headline" className={dimmed} />
          ) : (
            <span className={classes('text-heading text-muted', dimmed)}>No diffusion coefficient</span>
          )}
        </p>
        <VerdictMark
          verdict={result.verdict}
          alpha={result.alpha?.value ?? null}
          size={22}
          className={classes('text-lead', dimmed)}
        />
      </div>
      <div className={dimmed}>
        <p className="mt-1 max-w-measure">{result.sentence}</p>
        <RegimeLine result={result} />
        <SizeLine result={result} />
        {result.msd ? <MsdFigure result={result} /> : null}
        <div className="small mt-2 space-y-1 text-muted">
          <p>{describeData(result)}</p>
          {describeExclusions(result).map((line) => (
            <p key={line}>{line}.</p>
          ))}
          <Comparison result={result} />
        </div>
        <WarningList remarks={[...result.warnings, ...result.checks]} />
      </div>
    </div>
  );
}

/** The other numbers of the fit: the localisation error, and what a straight line would say. */
function Comparison({ result }: { result: AnalysisResult }) {
  const { sigma, lineFit, settings } = result;
  if (sigma === null && !lineFit) return null;
  return (
    <p>
      {sigma !== null ? (
        <>
          Localisation error <Quantity symbol="σ" value={sigma} digits={2} unit="µm" />{' '}
          {settings.sigma === null ? '(fitted). ' : '(given). '}
        </>
      ) : null}
      {lineFit ? (
        <>
          For comparison, a straight line through lags {lineFit.lagFirst} to {lineFit.lagLast} gives{' '}
          <Quantity symbol="D" value={lineFit.D} unit="µm²/s" />.
        </>
      ) : null}
    </p>
  );
}
