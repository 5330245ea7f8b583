import type { AnalysisResult } from '@/analysis/types';
import { msdRows } from '@/components/charts/msd-rows';
import { formatNumber } from '@/components/ui/format-quantity';

const COLUMNS = ['lag (frames)', 'τ (s)', 'MSD (µm²)', '± 95 % (µm²)', 'fit (µm²)', 'pairs'] as const;

/** The chart in words and numbers, for those who do not see it and those who want to know exactly. */
export function MsdTable({ result, summary }: { result: AnalysisResult; summary: string }) {
  const rows = result.msd ? msdRows(result.msd) : [];
  return (
    <details className="label print:hidden">
      <summary className="inline-flex min-h-7 items-center text-muted hover:text-ink max-desk:min-h-11 pointer-coarse:min-h-11">
        Numbers of this chart
      </summary>
      <p className="mt-2 max-w-measure">{summary}</p>
      <div
        className="mt-2 max-h-72 overflow-auto"
        tabIndex={0}
        role="group"
        aria-label="Table of the MSD curve"
      >
        <table className="w-full text-right tabular-nums">
          <thead className="sticky top-0 bg-page">
            <tr className="border-b">
              {COLUMNS.map((name) => (
                <th key={name} scope="col" className="py-1 pl-4 font-semibold whitespace-nowrap">
                  {name}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {rows.map((row) => (
              <tr key={row.lag} className="border-b">
                <th scope="row" className="py-0.5 pl-4 font-normal">
                  {row.lag}
                </th>
                <td className="pl-4">{formatNumber(row.tau, 4)}</td>
                <td className="pl-4">{formatNumber(row.msd, 4)}</td>
                <td className="pl-4">{formatNumber(row.high - row.msd, 2)}</td>
                <td className="pl-4">{formatNumber(row.fit, 4)}</td>
                <td className="pl-4">{row.pairs.toLocaleString('en')}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </details>
  );
}
