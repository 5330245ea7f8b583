import type { Exposure, Trajectories } from '../types';
import { checkSpec } from './check-spec';
import { decodeFile } from './decode';
import { MAX_PROBLEMS_KEPT } from './limits';
import { rowsOf, type Row } from './lines';
import { readNumber } from './number';
import { previewPaths } from './preview-paths';
import { summarise } from './summarise';
import type {
  IntakeFailure,
  LengthUnit,
  PathPreview,
  ReadingSpec,
  ReadingSummary,
  RowProblem,
} from './types';
import { MICROMETRES, SECONDS } from './units';

export interface ReadOutcome {
  readonly failed: false;
  readonly trajectories: Omit<Trajectories, 'hash'>;
  readonly summary: ReadingSummary;
  /** The first thousand rows that could not be used; `problemCount` counts all. */
  readonly problems: readonly RowProblem[];
  readonly problemCount: number;
  readonly paths: PathPreview;
}

/**
 * Reads a file exactly as a reading says. Nothing is dropped silently: every row that cannot be used is listed with its
 * line and reason. A row whose position alone is unreadable keeps its place as a gap (NaN).
 * @returns positions in µm, times in s; bit-equal to Number(text) where no unit is converted.
 */
export function readTrajectories(bytes: Uint8Array, spec: ReadingSpec): ReadOutcome | IntakeFailure {
  const bad = checkSpec(spec);
  if (bad) return bad;
  const decoded = decodeFile(bytes, spec.dialect.encoding);
  if ('failed' in decoded) return decoded;
  const rows = rowsOf(decoded.text, spec.dialect);
  if ('failed' in rows) return rows;
  const header = rows.find((row) => row.line === spec.dialect.headerLine)?.cells.join('\n');
  const collect = new Collector(spec);
  for (const row of rows) {
    if (row.line < spec.dialect.firstDataLine) continue;
    if (header !== undefined && row.cells.join('\n') === header) collect.problem(row, 'the header again');
    else collect.add(row);
  }
  if (collect.count === 0) {
    return {
      failed: true,
      code: 'no-rows',
      message:
        'Not one row could be read with these columns. Check which columns were chosen, and the decimal mark.',
      line: spec.dialect.firstDataLine,
    };
  }
  const trajectories = collect.trajectories();
  const { summary, contradiction } = summarise(trajectories, collect.problemCount);
  if (contradiction) return contradiction;
  return {
    failed: false,
    trajectories,
    summary,
    problems: collect.problems,
    problemCount: collect.problemCount,
    paths: previewPaths(trajectories),
  };
}

const NAMES = ['x', 'y', 'z'] as const;

class Collector {
  readonly problems: RowProblem[] = [];
  problemCount = 0;
  private readonly ids = new Map<string, number>();
  private readonly track: number[] = [];
  private readonly clock: number[] = [];
  private readonly axes: number[][];
  private readonly axisColumns: readonly number[];
  private readonly scales: readonly ((value: number) => number)[];

  constructor(private readonly spec: ReadingSpec) {
    const { columns, units } = spec;
    const used = NAMES.filter((name) => columns[name] !== null);
    this.axisColumns = used.map((name) => columns[name]!);
    this.scales = used.map((name) => toMicrometres(units[name]!, Number(spec.pixelSize)));
    this.axes = used.map(() => []);
  }

  get count(): number {
    return this.track.length;
  }

  problem(row: Row, reason: string): void {
    this.problemCount += 1;
    if (this.problems.length < MAX_PROBLEMS_KEPT) {
      this.problems.push({
        line: row.line,
        reason,
        text: row.cells.join(this.spec.dialect.delimiter).slice(0, 200),
      });
    }
  }

  add(row: Row): void {
    const { columns, dialect, units } = this.spec;
    const id = columns.track === null ? '1' : (row.cells[columns.track] ?? '');
    if (id === '') return this.problem(row, 'no track');
    const clockColumn = columns.time ?? columns.frame!;
    const clockText = row.cells[clockColumn] ?? '';
    const clock = readNumber(clockText, dialect.decimal);
    const what = columns.time === null ? 'frame' : 'time';
    if (Number.isNaN(clock))
      return this.problem(
        row,
        clockText === '' ? `no ${what}` : `${what} "${short(clockText)}" is not a number`,
      );
    if (columns.time === null && (!Number.isInteger(clock) || Math.abs(clock) > 2 ** 31 - 1)) {
      return this.problem(row, `frame "${short(clockText)}" is not a whole number`);
    }
    const values = this.axisColumns.map((column) => readNumber(row.cells[column] ?? '', dialect.decimal));
    const unreadable = values.findIndex(Number.isNaN);
    if (unreadable >= 0) {
      const text = row.cells[this.axisColumns[unreadable]!] ?? '';
      const name = NAMES.filter((one) => columns[one] !== null)[unreadable]!;
      this.problem(row, text === '' ? `no ${name}` : `${name} "${short(text)}" is not a number`);
    }
    let track = this.ids.get(id);
    if (track === undefined) this.ids.set(id, (track = this.ids.size));
    this.track.push(track);
    this.clock.push(columns.time === null ? clock : toSeconds(clock, SECONDS[units.time ?? 's']));
    for (const [axis, value] of values.entries())
      this.axes[axis]!.push(unreadable >= 0 ? NaN : this.scales[axis]!(value));
  }

  trajectories(): Omit<Trajectories, 'hash'> {
    const timed = this.spec.columns.time !== null;
    return {
      trackIds: [...this.ids.keys()],
      track: Int32Array.from(this.track),
      frame: timed ? null : Int32Array.from(this.clock),
      time: timed ? Float64Array.from(this.clock) : null,
      axes: this.axes.map((axis) => Float64Array.from(axis)),
      frameInterval: this.spec.frameInterval === null ? null : Number(this.spec.frameInterval),
      exposure: exposureOf(this.spec),
    };
  }
}

const short = (text: string) => (text.length > 30 ? `${text.slice(0, 30)}…` : text);

/** Division by a whole number rounds once; multiplication by 0.001 would round twice. */
const toSeconds = (value: number, seconds: number) =>
  seconds < 1 ? value / Math.round(1 / seconds) : value * seconds;

function toMicrometres(unit: LengthUnit, pixel: number): (value: number) => number {
  if (unit === 'um') return (value) => value;
  if (unit === 'px') return (value) => value * pixel;
  const factor = MICROMETRES[unit];
  return factor < 1 ? (value) => value / Math.round(1 / factor) : (value) => value * factor;
}

function exposureOf(spec: ReadingSpec): Exposure | null {
  if (spec.exposure === null) return null;
  return 'seconds' in spec.exposure
    ? { seconds: Number(spec.exposure.seconds) }
    : { fraction: Number(spec.exposure.fraction) };
}
