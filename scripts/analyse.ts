import { createHash } from 'node:crypto';
import { readFileSync, statSync } from 'node:fs';
import path from 'node:path';
import { analyse } from '../analysis/analyse';
import { tooBig } from '../analysis/intake/decode';
import { describeReading } from '../analysis/intake/describe';
import { MAX_BYTES } from '../analysis/intake/limits';
import type { ReadOutcome } from '../analysis/intake/read-trajectories';
import { takeIn } from '../analysis/intake/take-in';
import type { Inspection, Missing } from '../analysis/intake/types';
import { readingHash } from '../db/integrity/addresses';
import { CommandError, readOptions, USAGE, type Options } from './analyse-options';
import { forPeople, toJson, type FileOutcome, type Remark } from './analyse-output';

/** The same analysis as on the page, for scripts: one JSON object a file, or a table for people. */
function main(args: readonly string[]): number {
  let options: Options;
  try {
    options = readOptions(args);
  } catch (error) {
    if (!(error instanceof CommandError)) throw error;
    console.error(`${error.message}\n\n${USAGE}`);
    return 2;
  }
  if (options.help) {
    console.log(USAGE);
    return 0;
  }
  let code = 0;
  const outcomes: FileOutcome[] = [];
  for (const file of options.files) {
    try {
      const outcome = analyseFile(file, options);
      outcomes.push(outcome);
      if (!options.json) continue;
      console.log(toJson(outcome));
      for (const { message } of outcome.remarks) if (message !== null) console.error(`${file}: ${message}`);
    } catch (error) {
      if (!(error instanceof CommandError)) throw error;
      code = 2;
      console.error(`${file}: ${error.message}`);
      if (options.files.length > 1 && options.json)
        console.log(JSON.stringify({ file, error: error.message }));
    }
  }
  if (!options.json && outcomes.length > 0) console.log(forPeople(outcomes));
  return code;
}

/** @throws CommandError with the reason when the file cannot be read or analysed. */
function analyseFile(file: string, options: Options): FileOutcome {
  const bytes = readBytes(file);
  const { inspection, read } = takeIn(bytes, path.basename(file), options.stated);
  if (inspection.failed) throw new CommandError(inspection.message);
  if (read === null) throw new CommandError(howToState(inspection));
  if (read.failed) throw new CommandError(read.message);
  const hash = readingHash(createHash('sha256').update(bytes).digest('hex'), inspection.spec);
  const result = analyse([{ ...read.trajectories, hash }], options.settings);
  if ('failed' in result) throw new CommandError(result.message);
  return {
    file,
    result,
    description: describeReading(inspection.spec, read.summary),
    remarks: remarksOf(inspection, read, options),
  };
}

function remarksOf(inspection: Inspection, read: ReadOutcome, options: Options): Remark[] {
  const remarks: Remark[] = inspection.notes.map((message) => ({ code: null, message }));
  for (const what of inspection.assumed)
    if (what !== 'exposure') remarks.push({ code: ASSUMED[what] ?? null, message: null });
  if (options.stated.pixelSize && inspection.spec.pixelSize === null)
    remarks.push({ code: 'pixel-size-not-used', message: null });
  const [first] = read.problems;
  if (first) {
    const rows = `${read.problemCount} ${read.problemCount === 1 ? 'row' : 'rows'}`;
    remarks.push({
      code: 'rows-not-used',
      message: `${rows} could not be used, or not wholly; the first is line ${first.line} (${first.reason}).`,
    });
  }
  return remarks;
}

/** Codes for what a note already says in words. */
const ASSUMED: Partial<Record<Missing, string>> = {
  lengthUnit: 'length-unit-assumed',
  timeUnit: 'time-unit-assumed',
};

const STATE: Readonly<Record<Missing, string>> = {
  frameInterval: 'The file counts frames; state the time between them with --frame-interval SECONDS.',
  pixelSize: 'Positions are in pixels; state the size of one with --pixel-size MICROMETRES.',
  lengthUnit: 'The unit of length cannot be converted.',
  timeUnit: 'The unit of time cannot be converted.',
  exposure: 'State the exposure with --exposure SECONDS.',
};

/** What is missing and how to state it, with what intake said about units. */
function howToState({ required, notes }: Inspection): string {
  const units = required.includes('lengthUnit') || required.includes('timeUnit');
  const reasons = units ? notes.filter((note) => note.startsWith('The unit ')) : [];
  return [...required.map((what) => STATE[what]), ...reasons].join(' ');
}

function readBytes(file: string): Buffer {
  const place = path.resolve(callersFolder(), file);
  try {
    const { size } = statSync(place);
    if (size > MAX_BYTES) throw new CommandError(tooBig(size).message);
    return readFileSync(place);
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    if (code === undefined) throw error;
    const reasons: Record<string, string> = {
      ENOENT: 'There is no such file. Check the name.',
      EISDIR: 'This is a folder. Name a file in it.',
      EACCES: 'The file may not be read. Check its permissions.',
    };
    throw new CommandError(reasons[code] ?? `The file cannot be read (${code}).`);
  }
}

/** npm runs a script in the project's folder; file names are meant from where the person is. */
function callersFolder(): string {
  const { npm_lifecycle_event: script, INIT_CWD: folder } = process.env;
  return script === 'analyse' && folder ? folder : process.cwd();
}

process.exitCode = main(process.argv.slice(2));
