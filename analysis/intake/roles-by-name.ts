import type { ColumnRoles } from './types';
import { countsFrames, isTemperature, lengthUnit, timeUnit } from './units';

/** Which columns could play which part, judged by their names; null where no name fits. */
export type NamedRoles = Record<keyof ColumnRoles, number | null>;

export interface NamedColumn {
  readonly name: string;
  readonly unit: string | null;
  /** Whether most of its first cells are numbers. Only a track may be anything else, and a position may be missing. */
  readonly numeric: boolean;
  /** Numbers among its first cells; 0 when more of them are words. */
  readonly positions: number;
}

/** Words of general English, the surest first. A name counts when nothing but fillers stand beside the word. */
const TRACK = [
  'track',
  'tracks',
  'trajectory',
  'trajectories',
  'particle',
  'particles',
  'bead',
  'molecule',
  'object',
].concat(['vesicle', 'droplet', 'grain', 'sphere', 'path', 'trace', 'cell', 'label', 'id']);
const TIME = ['time', 't', 'times', 'timestamp', 'elapsed'];
const FRAME = ['frame', 'frames', 'image', 'slice', 'timestep', 'timepoint', 'step', 'index', 'f'];
const LINE_POSITION = ['position', 'displacement', 'distance'];

const NUMBER_FILLERS = ['id', 'no', 'nr', 'num', 'number', 'index', 'idx', 'name'];
const TIME_FILLERS = ['stamp', 'elapsed', 'relative', 'absolute', 'since', 'start', 'of', 'from'];
/** "time index" counts frames. */
const COUNTED_TIME = ['index', 'idx', 'no', 'nr', 'number', 'num', 'step', 'point'];
const AXIS_FILLERS = [
  'pos',
  'position',
  'positions',
  'coord',
  'coordinate',
  'coordinates',
  'centre',
  'center',
  'centroid',
].concat(['location', 'axis']);

/** "TrackID", "track_id", "Track No.", "particle #" → small words. */
export function wordsOf(name: string): string[] {
  let spaced = '';
  let before = '';
  for (const letter of name) {
    const lower = letter.toLowerCase();
    const upper = letter.toUpperCase();
    const isLetter = lower !== upper;
    const isDigit = letter >= '0' && letter <= '9';
    if (letter === '#') spaced += ' number ';
    else if (!isLetter && !isDigit) spaced += ' ';
    else if (
      isLetter &&
      letter === upper &&
      before !== '' &&
      before === before.toLowerCase() &&
      before !== before.toUpperCase()
    )
      spaced += ` ${lower}`;
    else spaced += lower;
    before = letter;
  }
  return spaced.split(' ').filter(Boolean);
}

/** Rank of the word that a name consists of, fillers aside; Infinity when it is another name. */
function rank(words: readonly string[], wanted: readonly string[], fillers: readonly string[]): number {
  const at = wanted.findIndex((word) => words.includes(word));
  if (at < 0) return words.length === 1 ? fusedRank(words[0]!, wanted, fillers) : Infinity;
  const rest = [...words];
  rest.splice(rest.indexOf(wanted[at]!), 1);
  return rest.every((word) => fillers.includes(word)) ? at : Infinity;
}

/** "trackid", "frameno", "xpos", "posx" are written as one word. */
function fusedRank(word: string, wanted: readonly string[], fillers: readonly string[]): number {
  for (const filler of fillers) {
    if (word.length <= filler.length) continue;
    const ends = word.endsWith(filler) ? wanted.indexOf(word.slice(0, -filler.length)) : -1;
    const begins = word.startsWith(filler) ? wanted.indexOf(word.slice(filler.length)) : -1;
    if (Math.max(ends, begins) >= 0) return Math.max(ends, begins);
  }
  return Infinity;
}

type Family = 'physical' | 'none' | 'px';

/**
 * The parts that columns play, from their names and units. Where positions stand twice, those in a unit of length win over
 * those without one, and these over pixels, as long as the axes stay together.
 */
export function rolesByName(columns: readonly NamedColumn[]): NamedRoles {
  const words = columns.map((column) => wordsOf(column.name));
  const axes = findAxes(columns, words);
  const taken = new Set(Object.values(axes).filter((at) => at !== null));
  const best = (score: (at: number) => number): number | null => {
    let found: number | null = null;
    let lowest = Infinity;
    for (let at = 0; at < columns.length; at++) {
      const value = taken.has(at) ? Infinity : score(at);
      if (value < lowest) [found, lowest] = [at, value];
    }
    if (found !== null) taken.add(found);
    return found;
  };
  const frame = best((at) => (columns[at]!.numeric ? frameRank(columns[at]!, words[at]!) : Infinity));
  const time = best((at) => (columns[at]!.numeric ? timeRank(columns[at]!, words[at]!) : Infinity));
  const track = best((at) => rank(words[at]!, TRACK, NUMBER_FILLERS));
  return { ...axes, frame, time, track };
}

function frameRank(column: NamedColumn, words: readonly string[]): number {
  const counted = words.some((word) => COUNTED_TIME.includes(word))
    ? rank(words, TIME, COUNTED_TIME)
    : Infinity;
  const inFrames =
    column.unit !== null && countsFrames(column.unit) ? rank(words, TIME, TIME_FILLERS) : Infinity;
  return Math.min(rank(words, FRAME, NUMBER_FILLERS), FRAME.length + Math.min(counted, inFrames));
}

function timeRank(column: NamedColumn, words: readonly string[]): number {
  const { unit } = column;
  if (unit !== null && timeUnit(unit) === null && (lengthUnit(unit) !== null || isTemperature(unit)))
    return Infinity;
  const named = rank(words, TIME, TIME_FILLERS);
  // A column called "seconds" or "ms" is a time whose name is its unit.
  return named < Infinity
    ? named
    : words.length === 1 && timeUnit(words[0]!) !== null
      ? TIME.length
      : Infinity;
}

function findAxes(columns: readonly NamedColumn[], words: readonly (readonly string[])[]) {
  const inFamily = (family: Family) =>
    (['x', 'y', 'z'] as const).map((axis) => {
      const at = columns.findIndex(
        (column, i) =>
          column.positions > 0 &&
          familyOf(column) === family &&
          rank(words[i]!, [axis], AXIS_FILLERS) < Infinity,
      );
      return at < 0 ? null : at;
    });
  const sets = (['physical', 'none', 'px'] as const).map(inFamily);
  const size = (set: readonly (number | null)[]) => set.filter((at) => at !== null).length;
  // Most axes first; among equals the order above. Then axes that only another family has.
  const chosen = [...sets].sort((a, b) => (b[0] === null ? 0 : size(b)) - (a[0] === null ? 0 : size(a)));
  const pick = (axis: 0 | 1 | 2) => chosen.find((set) => set[axis] !== null)?.[axis] ?? null;
  const x = pick(0) ?? linePosition(columns, words);
  if (x === null) return { x, y: null, z: null };
  // An axis that is empty where x is not was not measured.
  const beside = (at: number | null) =>
    at !== null && columns[at]!.positions * 2 >= columns[x]!.positions ? at : null;
  const y = beside(pick(1));
  return { x, y, z: y === null ? null : beside(pick(2)) };
}

/** Positions along one line may be called just that. */
function linePosition(columns: readonly NamedColumn[], words: readonly (readonly string[])[]): number | null {
  const at = columns.findIndex(
    (column, i) => column.positions > 0 && words[i]!.length === 1 && LINE_POSITION.includes(words[i]![0]!),
  );
  return at < 0 ? null : at;
}

/** Null for a column that cannot be a position, such as "x_min" read as minutes. */
function familyOf({ unit }: NamedColumn): Family | null {
  if (unit === null) return 'none';
  const length = lengthUnit(unit);
  if (length !== null) return length === 'px' ? 'px' : 'physical';
  return timeUnit(unit) === null ? 'none' : null;
}
