import type { AnalysisResult, MsdCurve } from '@/analysis/types';
import { formatNumber } from '@/components/ui/format-quantity';

/** One lag of the curve: what the chart draws and the table beside it prints. */
export interface MsdRow {
  /** Lag, frames. */
  readonly lag: number;
  /** Lag time, s. */
  readonly tau: number;
  /** Mean squared displacement, µm², with the ends of its 95 % interval. */
  readonly msd: number;
  readonly low: number;
  readonly high: number;
  /** The fitted model, µm², with the band that D's interval gives. */
  readonly fit: number;
  readonly fitLow: number;
  readonly fitHigh: number;
  readonly pairs: number;
}

/** Two-sided 95 % point of the normal distribution (any table of it). */
const NORMAL_95 = 1.96;

/** Rows of the chart and of the table beside it. Intervals are ± 1.96 standard errors, cut at zero. */
export function msdRows(msd: MsdCurve): MsdRow[] {
  return msd.lag.map((lag, i) => {
    const half = NORMAL_95 * msd.se[i]!;
    const ends = [msd.modelLo[i]!, msd.modelHi[i]!];
    return {
      lag,
      tau: msd.lagSeconds[i]!,
      msd: msd.total[i]!,
      low: Math.max(0, msd.total[i]! - half),
      high: msd.total[i]! + half,
      fit: msd.model[i]!,
      // σ falls where D rises, so at the first lags the two curves may cross.
      fitLow: Math.min(...ends),
      fitHigh: Math.max(...ends),
      pairs: msd.pairs[i]!,
    };
  });
}

/** The chart in a sentence or two, for those who do not see it. */
export function msdSummary(result: AnalysisResult): string {
  const rows = result.msd ? msdRows(result.msd) : [];
  const [first, last] = [rows[0], rows.at(-1)];
  if (!first || !last) return 'There are no points to show.';
  const at = (row: MsdRow) => `${formatNumber(row.msd, 3)} µm² at τ = ${formatNumber(row.tau, 3)} s`;
  if (rows.length === 1) return `Mean squared displacement at one lag time: ${at(first)}.`;
  const outside = rows.filter((row) => row.fit < row.low || row.fit > row.high).length;
  const agreement =
    outside === 0
      ? 'The fitted model runs through the 95 % intervals of all points.'
      : `The fitted model runs outside the 95 % interval of ${outside} of ${rows.length} points; neighbouring points are not independent of each other.`;
  return `Mean squared displacement at ${rows.length} lag times, from ${at(first)} to ${at(last)}. ${agreement}`;
}
