import type { Trajectories } from '../types';
import { exposureOf, toMicrometres, toSeconds } from './convert';
import { MAX_PROBLEM_TEXT, MAX_PROBLEMS_KEPT } from './limits';
import { GrowingFloats } from './growing';
import { readNumber, whyNoNumber } from './number';
import type { ReadingSpec, RowProblem } from './types';

const AXES = ['x', 'y', 'z'] as const;
const LARGEST_FRAME = 2 ** 31 - 1;

/** Id of the one track of a file without a track column. */
const ONLY_TRACK = '1';

/**
 * Turns rows of cells into columns of numbers. Every row that cannot be used, or not wholly, is listed with its reason. A row
 * whose position alone is unreadable keeps its place, with NaN, so that whoever analyses it knows of the gap.
 */
export class RowCollector {
  readonly problems: RowProblem[] = [];
  problemCount = 0;
  private readonly ids = new Map<string, number>();
  private readonly track = new GrowingFloats();
  private readonly clock = new GrowingFloats();
  private readonly axes: {
    name: string;
    column: number;
    values: GrowingFloats;
    convert: (value: number) => number;
  }[];
  private lastId: string | null = null;
  private lastTrack = -1;
  private readonly convertClock: (value: number) => number;

  constructor(private readonly spec: ReadingSpec) {
    const { columns, units } = spec;
    this.axes = AXES.flatMap((name) => {
      const column = columns[name];
      if (column === null) return [];
      return [
        {
          name,
          column,
          values: new GrowingFloats(),
          convert: toMicrometres(units[name] ?? 'um', Number(spec.pixelSize)),
        },
      ];
    });
    this.convertClock = columns.time === null ? (frame) => frame : toSeconds(units.time ?? 's');
  }

  get count(): number {
    return this.track.length;
  }

  addProblem(line: number, reason: string, text: string): void {
    this.problemCount += 1;
    if (this.problems.length < MAX_PROBLEMS_KEPT)
      this.problems.push({ line, reason, text: text.slice(0, MAX_PROBLEM_TEXT) });
  }

  /** @param text - the line as it stands in the file, asked for only when there is something to list. */
  add(line: number, cells: readonly string[], text: () => string): void {
    const { columns, dialect } = this.spec;
    const id = columns.track === null ? ONLY_TRACK : (cells[columns.track] ?? '');
    if (id === '') return this.addProblem(line, 'the track is missing', text());
    const timed = columns.time !== null;
    const clockText = cells[columns.time ?? columns.frame!] ?? '';
    const clock = this.convertClock(readNumber(clockText, dialect.decimal));
    if (!Number.isFinite(clock))
      return this.addProblem(line, whyNoNumber(timed ? 'time' : 'frame', clockText, dialect.decimal), text());
    if (!timed && !(Number.isInteger(clock) && Math.abs(clock) <= LARGEST_FRAME)) {
      const why = Number.isInteger(clock) ? 'is too large' : 'is not a whole number';
      return this.addProblem(line, `frame "${clockText.slice(0, 30)}" ${why}`, text());
    }
    let reasons = '';
    for (const axis of this.axes) {
      const cell = cells[axis.column] ?? '';
      const value = axis.convert(readNumber(cell, dialect.decimal));
      if (Number.isFinite(value)) {
        axis.values.push(value);
        continue;
      }
      axis.values.push(NaN);
      reasons += `${reasons === '' ? '' : '; '}${whyNoNumber(axis.name, cell, dialect.decimal)}`;
    }
    if (reasons !== '') this.addProblem(line, reasons, text());
    this.track.push(this.trackOf(id));
    this.clock.push(clock);
  }

  /** Columns of numbers of a plain row, in the order of `addNumbers`: time or frame first, then the axes. */
  get numberColumns(): number[] {
    return [(this.spec.columns.time ?? this.spec.columns.frame)!, ...this.axes.map(({ column }) => column)];
  }

  /**
   * A row that is all numbers. @returns false, and nothing is kept, when there is something to say about it.
   */
  addNumbers(id: string, values: Float64Array): boolean {
    const clock = this.convertClock(values[0]!);
    if (!Number.isFinite(clock)) return false;
    if (this.spec.columns.time === null && !(Number.isInteger(clock) && Math.abs(clock) <= LARGEST_FRAME))
      return false;
    for (let axis = 0; axis < this.axes.length; axis++)
      if (!Number.isFinite(this.axes[axis]!.convert(values[axis + 1]!))) return false;
    for (let axis = 0; axis < this.axes.length; axis++)
      this.axes[axis]!.values.push(this.axes[axis]!.convert(values[axis + 1]!));
    this.track.push(this.trackOf(id));
    this.clock.push(clock);
    return true;
  }

  private trackOf(id: string): number {
    if (id === this.lastId) return this.lastTrack;
    let track = this.ids.get(id);
    if (track === undefined) this.ids.set(id, (track = this.ids.size));
    this.lastId = id;
    this.lastTrack = track;
    return track;
  }

  /** The columns as a whole; the collector is empty afterwards. */
  trajectories(): Omit<Trajectories, 'hash'> {
    const timed = this.spec.columns.time !== null;
    const { frameInterval } = this.spec;
    return {
      trackIds: [...this.ids.keys()],
      track: Int32Array.from(this.track.take()),
      frame: timed ? null : Int32Array.from(this.clock.take()),
      time: timed ? this.clock.take() : null,
      axes: this.axes.map((axis) => axis.values.take()),
      // Measured times say more than a rounded statement that agrees with them.
      frameInterval: timed || frameInterval === null ? null : Number(frameInterval),
      pixelSize: this.spec.pixelSize === null ? null : Number(this.spec.pixelSize),
      exposure: exposureOf(this.spec),
    };
  }
}
