import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { analyse } from '../analysis/analyse';
import { applyStated } from '../analysis/intake/apply-stated';
import { inspectFile } from '../analysis/intake/inspect-file';
import { readTrajectories } from '../analysis/intake/read-trajectories';
import type { AnalysisResult } from '../analysis/types';
import { readingHash } from '../db/integrity/addresses';
import { CommandError, readOptions, USAGE, type Options } from './analyse-options';

/** The same analysis as on the page, for scripts: one JSON object a file, or a line for people. */
function main(args: string[]): number {
  if (args.includes('--help')) {
    console.log(USAGE);
    return 0;
  }
  let options: Options;
  try {
    options = readOptions(args);
  } catch (error) {
    if (!(error instanceof CommandError)) throw error;
    console.error(`${error.message}\n\n${USAGE}`);
    return 2;
  }
  let code = 0;
  for (const file of options.files) {
    try {
      const result = analyseFile(file, options);
      console.log(options.json ? JSON.stringify(toJson(file, result)) : forPeople(file, result));
    } catch (error) {
      if (!(error instanceof CommandError)) throw error;
      code = 2;
      console.error(`${file}: ${error.message}`);
      if (options.files.length > 1 && options.json)
        console.log(JSON.stringify({ file, error: error.message }));
    }
  }
  return code;
}

/** @throws CommandError with the reason when the file cannot be read or analysed. */
function analyseFile(file: string, options: Options): AnalysisResult {
  let bytes: Buffer;
  try {
    bytes = readFileSync(file);
  } catch (error) {
    throw new CommandError(
      `cannot be read (${(error as NodeJS.ErrnoException).code ?? 'unknown'}). Check the name.`,
    );
  }
  const inspected = inspectFile(bytes, file);
  if (inspected.failed) throw new CommandError(inspected.message);
  const inspection = applyStated(inspected, options.stated);
  if (inspection.required.includes('frameInterval')) {
    throw new CommandError(
      'the file counts frames; state the time between them with --frame-interval SECONDS.',
    );
  }
  if (inspection.required.includes('pixelSize')) {
    throw new CommandError('positions are in pixels; state the size of one with --pixel-size MICROMETRES.');
  }
  const outcome = readTrajectories(bytes, inspection.spec);
  if (outcome.failed) throw new CommandError(outcome.message);
  for (const note of inspection.notes) console.error(`${file}: ${note}`);
  if (outcome.problemCount > 0) {
    console.error(
      `${file}: ${outcome.problemCount} row(s) could not be used; the first is line ${outcome.problems[0]?.line} (${outcome.problems[0]?.reason}).`,
    );
  }
  const hash = readingHash(createHash('sha256').update(bytes).digest('hex'), inspection.spec);
  const result = analyse([{ ...outcome.trajectories, hash }], options.settings);
  if ('failed' in result) throw new CommandError(result.message);
  return result;
}

function toJson(file: string, result: AnalysisResult) {
  const { D, drift } = result;
  return {
    file,
    D: D?.value ?? null,
    D_lo: D?.lo ?? null,
    D_hi: D?.hi ?? null,
    sigma: result.sigma,
    verdict: result.verdict,
    v: drift?.significant ? drift.speed : null,
    L: result.L?.value ?? null,
    alpha: result.alpha?.value ?? null,
    tracks: result.tracks,
    frames: result.frames,
    warnings: result.warnings.map((warning) => warning.code),
  };
}

function forPeople(file: string, result: AnalysisResult): string {
  const digits = (value: number | null | undefined) =>
    value === null || value === undefined ? '–' : value.toPrecision(3);
  const { D } = result;
  const headline = D ? `D = ${digits(D.value)} µm²/s (${digits(D.lo)} to ${digits(D.hi)})` : 'no D';
  const lines = [
    `${file}: ${headline}, ${result.verdict}; ${result.tracks} tracks, ${result.frames} frames`,
    `  ${result.sentence}`,
    ...result.warnings.map((warning) => `  ${warning.level}: ${warning.message}`),
  ];
  return lines.join('\n');
}

process.exitCode = main(process.argv.slice(2));
