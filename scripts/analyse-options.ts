import { parseArgs } from 'node:util';
import { DEFAULT_SETTINGS } from '../analysis/analyse';
import type { Stated } from '../analysis/intake/apply-stated';
import type { AnalysisSettings } from '../analysis/types';

/** A fault of the caller's, told on stderr; the command then ends with 2. */
export class CommandError extends Error {}

export interface Options {
  readonly files: readonly string[];
  readonly json: boolean;
  readonly stated: Stated;
  readonly settings: AnalysisSettings;
}

export const USAGE = `Usage: npm run --silent analyse -- FILE… [options] [--json]

  --frame-interval S       seconds from one frame to the next (needed when the file counts frames)
  --pixel-size UM          positions without a unit are pixels of this many micrometres
  --exposure S             exposure of a frame, seconds
  --exposure-fraction F    the same as a fraction of the frame interval, 0 to 1
  --sigma UM               localisation error per axis, when it is known
  --temperature C          degrees Celsius
  --medium water           medium, for an apparent size
  --particle-diameter UM   hydrodynamic diameter, for the expected D
  --dims 1|2|3             number of axes to use, from x on (all that were measured)
  --json                   one JSON object a file on stdout; remarks go to stderr

D in µm²/s; sigma, L in µm; v in µm/s. Ends with 2 when a file or an option is not right.`;

/** @throws CommandError that names the option and what it wants. */
export function readOptions(args: string[]): Options {
  const { values, positionals } = parse(args);
  if (positionals.length === 0) throw new CommandError('Name at least one file.');
  const decimal = (
    name: keyof typeof values,
    rule: (value: number) => boolean,
    wants: string,
  ): string | null => {
    const text = values[name];
    if (text === undefined) return null;
    if (typeof text !== 'string' || text.trim() === '' || !rule(Number(text))) {
      throw new CommandError(`--${name} wants ${wants}, not "${String(text)}".`);
    }
    return text;
  };
  const positive = (name: keyof typeof values, unit: string) =>
    decimal(name, (value) => value > 0 && Number.isFinite(value), `a number of ${unit} above zero`);
  const toNumber = (text: string | null) => (text === null ? null : Number(text));

  const seconds = positive('exposure', 'seconds');
  const fraction = decimal(
    'exposure-fraction',
    (value) => value >= 0 && value <= 1,
    'a fraction from 0 to 1',
  );
  if (seconds !== null && fraction !== null)
    throw new CommandError('State the exposure once: --exposure or --exposure-fraction.');
  const sigma = decimal(
    'sigma',
    (value) => value >= 0 && Number.isFinite(value),
    'a number of micrometres, zero or more',
  );
  const temperature = decimal('temperature', (value) => value > -273.15 && value < 1000, 'degrees Celsius');
  const dims = decimal('dims', (value) => [1, 2, 3].includes(value), '1, 2 or 3');
  if (values.medium !== undefined && values.medium !== 'water') {
    throw new CommandError(`--medium knows "water", not "${values.medium}".`);
  }
  return {
    files: positionals,
    json: values.json ?? false,
    stated: {
      frameInterval: positive('frame-interval', 'seconds'),
      pixelSize: positive('pixel-size', 'micrometres'),
    },
    settings: {
      ...DEFAULT_SETTINGS,
      dims: dims === null ? 'auto' : (Number(dims) as 1 | 2 | 3),
      exposure:
        seconds !== null
          ? { seconds: Number(seconds) }
          : fraction !== null
            ? { fraction: Number(fraction) }
            : null,
      sigma: toNumber(sigma),
      temperature: toNumber(temperature),
      medium: values.medium === 'water' ? { name: 'water' } : null,
      particleDiameter: toNumber(positive('particle-diameter', 'micrometres')),
    },
  };
}

function parse(args: string[]) {
  const text = { type: 'string' } as const;
  try {
    return parseArgs({
      args,
      allowPositionals: true,
      strict: true,
      options: {
        'frame-interval': text,
        'pixel-size': text,
        exposure: text,
        'exposure-fraction': text,
        sigma: text,
        temperature: text,
        medium: text,
        'particle-diameter': text,
        dims: text,
        json: { type: 'boolean' },
      },
    });
  } catch (error) {
    throw new CommandError((error as Error).message);
  }
}
