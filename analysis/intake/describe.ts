import type { LengthUnit, ReadingSpec, ReadingSummary } from './types';

const DELIMITERS: Readonly<Record<ReadingSpec['dialect']['delimiter'], string>> = {
  ',': 'comma-separated',
  ';': 'semicolon-separated',
  '\t': 'tab-separated',
  '|': 'bar-separated',
  ' ': 'separated by blanks',
};
const LENGTHS: Readonly<Record<LengthUnit, string>> = { um: 'µm', nm: 'nm', mm: 'mm', m: 'm', px: 'pixels' };

/** A reading in one sentence: "12 tracks, 400 frames at 0.05 s, comma-separated, positions in µm". */
export function describeReading(spec: ReadingSpec, summary: ReadingSummary): string {
  const { dialect, units } = spec;
  const lengths = [...new Set([units.x, units.y, units.z].filter((unit) => unit !== null))];
  const at = summary.frameInterval === null ? '' : ` at ${Number(summary.frameInterval.toPrecision(4))} s`;
  const cut = `${DELIMITERS[dialect.delimiter]}${dialect.decimal === ',' ? ' with decimal comma' : ''}`;
  const size = spec.pixelSize === null ? '' : ` of ${spec.pixelSize} µm`;
  const positions = lengths.map((unit) => LENGTHS[unit] + (unit === 'px' ? size : '')).join(' and ');
  return `${count(summary.tracks, 'track')}, ${count(summary.frames, 'frame')}${at}, ${cut}, positions in ${positions}`;
}

const count = (n: number, what: string) => `${n.toLocaleString('en')} ${what}${n === 1 ? '' : 's'}`;
