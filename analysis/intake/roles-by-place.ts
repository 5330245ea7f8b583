import type { NamedRoles } from './roles-by-name';

/**
 * The parts that columns without names play, judged by what stands in them: a track repeats, a clock rises within each track,
 * and positions follow. A person checks the guess, so it need not be right for every file, but it is never silent.
 * @param cells - first rows as text.   @param numbers - the same as numbers, NaN where a cell is none.
 */
export function rolesByPlace(
  cells: readonly (readonly string[])[],
  numbers: readonly (readonly number[])[],
): NamedRoles {
  const none: NamedRoles = { track: null, time: null, frame: null, x: null, y: null, z: null };
  const width = Math.max(0, ...cells.map((row) => row.length));
  const columns = Array.from({ length: width }, (_, at) => at);
  const numeric = columns.filter((at) => isNumeric(numbers, at));
  const track =
    width < 4 ? null : ([0, width - 1, 1].find((at) => isTrack(cells, numbers, at, numeric)) ?? null);
  const clock = findClock(
    cells,
    numbers,
    numeric.filter((at) => at !== track),
    track,
  );
  if (clock === null) return { ...none, track };
  const left = numeric.filter((at) => at !== track && at !== clock.column && at !== clock.beside);
  const right = left.filter((at) => at > clock.column);
  const [x = null, y = null, z = null] = right.length > 0 ? right : left;
  return { ...none, track, [clock.role]: clock.column, x, y, z };
}

/** At least half of the cells are numbers. */
export function isNumeric(numbers: readonly (readonly number[])[], column: number): boolean {
  let count = 0;
  for (const row of numbers) if (!Number.isNaN(row[column] ?? NaN)) count += 1;
  return count * 2 >= numbers.length && count > 0;
}

/** Names or whole numbers, each in several rows, and another column that rises while it stays. */
function isTrack(
  cells: readonly (readonly string[])[],
  numbers: readonly (readonly number[])[],
  column: number,
  numeric: readonly number[],
): boolean {
  if (numbers.some((row) => !Number.isNaN(row[column] ?? NaN) && !Number.isInteger(row[column])))
    return false;
  const ids = new Set(cells.map((row) => row[column] ?? ''));
  if (ids.has('') || ids.size * 2 > cells.length) return false;
  return (
    findClock(
      cells,
      numbers,
      numeric.filter((at) => at !== column),
      column,
    ) !== null
  );
}

interface Clock {
  readonly column: number;
  readonly role: 'time' | 'frame';
  /** A column of frames beside one of times: no position. */
  readonly beside: number | null;
}

/** The first column that rises within every track; times are preferred to frames right beside them. */
export function findClock(
  cells: readonly (readonly string[])[],
  numbers: readonly (readonly number[])[],
  candidates: readonly number[],
  track: number | null,
): Clock | null {
  const first = candidates.find((column) => rises(cells, numbers, column, track));
  if (first === undefined) return null;
  if (!isWhole(numbers, first)) return { column: first, role: 'time', beside: null };
  const next = first + 1;
  const timed = candidates.length > 2 && candidates.includes(next) && keepsPace(numbers, first, next);
  return timed
    ? { column: next, role: 'time', beside: first }
    : { column: first, role: 'frame', beside: null };
}

/** Times that belong to frames grow by the same step with each, to a tenth of it; positions do not. */
function keepsPace(numbers: readonly (readonly number[])[], frames: number, times: number): boolean {
  const points = numbers.map((row) => [row[frames] ?? NaN, row[times] ?? NaN] as const);
  const known = points.filter(([frame, time]) => !Number.isNaN(frame) && !Number.isNaN(time));
  const first = known[0];
  const last = known.reduce((latest, point) => (point[0] > latest[0] ? point : latest), first ?? [0, 0]);
  if (first === undefined || known.length < 3 || !(last[0] > first[0])) return false;
  const step = (last[1] - first[1]) / (last[0] - first[0]);
  return (
    step > 0 &&
    known.every(([frame, time]) => Math.abs(time - first[1] - step * (frame - first[0])) <= 0.1 * step)
  );
}

const isWhole = (numbers: readonly (readonly number[])[], column: number) =>
  numbers.every((row) => Number.isNaN(row[column] ?? NaN) || Number.isInteger(row[column]));

function rises(
  cells: readonly (readonly string[])[],
  numbers: readonly (readonly number[])[],
  column: number,
  track: number | null,
): boolean {
  const last = new Map<string, number>();
  let steps = 0;
  for (const [at, row] of numbers.entries()) {
    const value = row[column] ?? NaN;
    if (Number.isNaN(value)) continue;
    const id = track === null ? '' : (cells[at]?.[track] ?? '');
    const before = last.get(id);
    if (before !== undefined) {
      if (value < before) return false;
      if (value > before) steps += 1;
    }
    last.set(id, value);
  }
  return steps > 0 || numbers.length === 1;
}
