import { parseArgs } from 'node:util';
import { DEFAULT_SETTINGS } from '../analysis/analyse';
import type { Stated } from '../analysis/intake/apply-stated';
import { readNumber } from '../analysis/intake/number';
import type { AnalysisSettings } from '../analysis/types';

/** A fault of the caller's or of a file, told on stderr; the command then ends with 2. */
export class CommandError extends Error {}

export interface Options {
  readonly files: readonly string[];
  readonly help: boolean;
  readonly json: boolean;
  readonly stated: Stated;
  readonly settings: AnalysisSettings;
}

export const USAGE = `Usage: npm run --silent analyse -- FILE… [options] [--json]

  --frame-interval S       seconds from one frame to the next (needed when the file counts frames;
                           refused when it contradicts the times in the file)
  --pixel-size UM          positions without a unit are pixels of this many micrometres
                           (a unit in the header wins)
  --exposure S             exposure of a frame, seconds
  --exposure-fraction F    the same as a fraction of the frame interval, 0 to 1
  --sigma UM               localisation error per axis, when it is known
  --temperature C          degrees Celsius
  --medium water           medium, for an apparent size
  --particle-diameter UM   hydrodynamic diameter, for the expected D
  --dims 1|2|3             number of axes to use, from x on (all that were measured)
  --json                   one JSON object a file on stdout; remarks go to stderr
  --help                   this text

D in µm²/s; sigma, L in µm; v in µm/s. A file without units is read as µm and s.
Ends with 2 when a file or an option is not right.`;

const TEXT = { type: 'string' } as const;
const FLAG = { type: 'boolean' } as const;
const OPTIONS = {
  'frame-interval': TEXT,
  'pixel-size': TEXT,
  exposure: TEXT,
  'exposure-fraction': TEXT,
  sigma: TEXT,
  temperature: TEXT,
  medium: TEXT,
  'particle-diameter': TEXT,
  dims: TEXT,
  json: FLAG,
  help: { ...FLAG, short: 'h' },
} as const;
type TextOption = Exclude<keyof typeof OPTIONS, 'json' | 'help'>;

/** @throws CommandError that names the option and what it wants. */
export function readOptions(args: readonly string[]): Options {
  const { values, positionals } = parse(args);
  const help = values.help ?? false;
  if (positionals.length === 0 && !help) throw new CommandError('Name at least one file.');
  /** The option's text where it is a number that fits; the grammar is that of the files, with a point. */
  const decimal = (name: TextOption, fits: (value: number) => boolean, wants: string): string | null => {
    const text = values[name];
    if (text === undefined) return null;
    if (!fits(readNumber(text, '.'))) throw new CommandError(`--${name} wants ${wants}, not "${text}".`);
    return text;
  };
  const positive = (name: TextOption, unit: string) =>
    decimal(name, (value) => value > 0, `a number of ${unit} above zero`);
  const sigma = decimal('sigma', (value) => value >= 0, 'a number of micrometres, zero or more');
  const temperature = decimal('temperature', (value) => value > -273.15 && value < 1000, 'degrees Celsius');
  const dims = decimal('dims', (value) => [1, 2, 3].includes(value), '1, 2 or 3');
  if (values.medium !== undefined && values.medium !== 'water')
    throw new CommandError(`--medium knows "water", not "${values.medium}".`);
  const seconds = decimal('exposure', (value) => value >= 0, 'a number of seconds, zero or more');
  const fraction = decimal(
    'exposure-fraction',
    (value) => value >= 0 && value <= 1,
    'a fraction from 0 to 1',
  );
  if (seconds !== null && fraction !== null)
    throw new CommandError('State the exposure once: --exposure or --exposure-fraction.');
  return {
    files: positionals,
    help,
    json: values.json ?? false,
    stated: {
      frameInterval: positive('frame-interval', 'seconds'),
      pixelSize: positive('pixel-size', 'micrometres'),
      exposure: exposureFrom(seconds, fraction),
    },
    settings: {
      ...DEFAULT_SETTINGS,
      dims: dims === null ? 'auto' : (Number(dims) as 1 | 2 | 3),
      sigma: toNumber(sigma),
      temperature: toNumber(temperature),
      medium: values.medium === 'water' ? { name: 'water' } : null,
      particleDiameter: toNumber(positive('particle-diameter', 'micrometres')),
    },
  };
}

const toNumber = (text: string | null) => (text === null ? null : Number(text));

/** No exposure at all is the fraction 0 of any interval. */
function exposureFrom(seconds: string | null, fraction: string | null): Stated['exposure'] {
  if (fraction !== null) return { fraction };
  if (seconds === null) return null;
  return Number(seconds) === 0 ? { fraction: '0' } : { seconds };
}

function parse(args: readonly string[]) {
  try {
    return parseArgs({ args: withNegatives(args), allowPositionals: true, strict: true, options: OPTIONS });
  } catch (error) {
    if (!(error as NodeJS.ErrnoException).code?.startsWith('ERR_PARSE_ARGS')) throw error;
    throw new CommandError((error as Error).message);
  }
}

/** "--temperature -5" is meant as "--temperature=-5"; a parser of options would take the number for one. */
function withNegatives(args: readonly string[]): string[] {
  const joined: string[] = [];
  for (const arg of args) {
    const before = joined.at(-1);
    const name = before?.startsWith('--') ? before.slice(2) : '';
    const takesText = Object.hasOwn(OPTIONS, name) && OPTIONS[name as TextOption].type === 'string';
    if (takesText && arg.startsWith('-') && !Number.isNaN(readNumber(arg, '.')))
      joined[joined.length - 1] += `=${arg}`;
    else joined.push(arg);
  }
  return joined;
}
