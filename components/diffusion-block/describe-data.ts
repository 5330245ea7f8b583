import type { AnalysisResult } from '@/analysis/types';

const count = (n: number, what: string) => `${n.toLocaleString('en')} ${what}${n === 1 ? '' : 's'}`;

/** What a result rests on: "40 tracks, 7,921 positions, 7,802 displacements in 2-D, 79 gaps." */
export function describeData(result: AnalysisResult): string {
  const parts = [
    count(result.tracks, 'track'),
    count(result.frames, 'position'),
    `${count(result.displacements, 'displacement')} in ${result.dims}-D`,
  ];
  if (result.gaps > 0) parts.push(count(result.gaps, 'gap'));
  return `${parts.join(', ')}.`;
}

const ONE = { rows: 'row', tracks: 'track', axes: 'axis', displacements: 'displacement' } as const;

/** What was left out of it and why, one line each: "12 rows left out: position not readable". */
export function describeExclusions(result: AnalysisResult): string[] {
  return result.exclusions.map(
    ({ count: n, what, reason }) =>
      `${n.toLocaleString('en')} ${n === 1 ? ONE[what] : what} left out: ${reason}`,
  );
}
