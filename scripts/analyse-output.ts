import type { AnalysisResult } from '../analysis/types';

/** What became of one file. */
export interface FileOutcome {
  readonly file: string;
  readonly result: AnalysisResult;
  /** One sentence on how the file was read. */
  readonly description: string;
  readonly remarks: readonly Remark[];
}

/** Something that intake assumed or left out: a sentence for people, a code for programs, or both. */
export interface Remark {
  readonly code: string | null;
  readonly message: string | null;
}

/** The line of a file for programs. Keys and units are those of `--help`; nothing here is rounded. */
export function toJson({ file, result, remarks }: FileOutcome): string {
  const { D } = result;
  const looks = result.checks.filter(({ level }) => level !== 'fine');
  return JSON.stringify({
    file,
    D: D?.value ?? null,
    D_lo: D?.lo ?? null,
    D_hi: D?.hi ?? null,
    sigma: result.sigma,
    verdict: result.verdict,
    v: speedOf(result),
    L: result.L?.value ?? null,
    alpha: result.alpha?.value ?? null,
    tracks: result.tracks,
    frames: result.frames,
    warnings: [...remarks, ...result.warnings, ...looks].flatMap(({ code }) => code ?? []),
  });
}

/** Of all tracks together, or of each in a direction of its own. */
function speedOf({ drift, individualSpeed }: AnalysisResult): number | null {
  if (individualSpeed) return individualSpeed.value;
  return drift?.significant ? drift.speed : null;
}

const HEADINGS = ['file', 'D (µm²/s)', '95 % interval', 'verdict', 'v (µm/s)', 'tracks', 'frames'];

/** A table of all files, then for each what the verdict means and what to look at. */
export function forPeople(outcomes: readonly FileOutcome[]): string {
  const rows = [HEADINGS, ...outcomes.map(cells)];
  const widths = HEADINGS.map((_, at) => Math.max(...rows.map((row) => row[at]!.length)));
  const table = rows.map((row) =>
    row
      .map((cell, at) => cell.padEnd(widths[at]!))
      .join('  ')
      .trimEnd(),
  );
  return [...table, ...outcomes.flatMap(explain)].join('\n');
}

function cells({ file, result }: FileOutcome): string[] {
  const { D } = result;
  const speed = speedOf(result);
  return [
    file,
    digits(D?.value),
    D ? `${digits(D.lo)} to ${digits(D.hi)}` : '–',
    result.verdict,
    speed === null ? '–' : digits(speed),
    String(result.tracks),
    String(result.frames),
  ];
}

function explain({ file, result, description, remarks }: FileOutcome): string[] {
  const size = result.stokesEinstein;
  const physics = [
    size?.diameter && `Apparent diameter ${digits(size.diameter.value)} µm.`,
    size?.apparentViscosity && `Apparent viscosity ${digits(size.apparentViscosity.value)} mPa·s.`,
    typeof size?.expectedD === 'number' && `Expected D ${digits(size.expectedD)} µm²/s.`,
  ].filter((line) => typeof line === 'string');
  const looks = result.checks.filter(({ level }) => level !== 'fine');
  const messages = [...remarks, ...result.warnings, ...looks].flatMap(({ message }) => message ?? []);
  return [
    '',
    `${file}: ${description}`,
    ...[result.sentence, ...physics, ...messages].map((line) => `  ${line}`),
  ];
}

const digits = (value: number | null | undefined) =>
  value === null || value === undefined ? '–' : String(Number(value.toPrecision(3)));
