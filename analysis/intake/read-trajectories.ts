import type { Trajectories } from '../types';
import { eachByteRow, mayReadBytes, startOfLine } from './byte-rows';
import { checkColumns, checkSpec } from './check-spec';
import { RowCollector } from './collect-rows';
import { contradictionOf } from './contradiction';
import { decodeFile, unfitBytes } from './decode';
import { intakeFailure } from './failure';
import { previewPaths } from './preview-paths';
import { eachRow, withPlainBreaks, type RowVisitor } from './rows';
import { summarise } from './summarise';
import type { Dialect, IntakeFailure, PathPreview, ReadingSpec, ReadingSummary, RowProblem } from './types';

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
  const fault = checkSpec(spec);
  if (fault) return fault;
  const collector = new RowCollector(spec);
  const data = bytes.subarray(startOfLine(bytes, spec.dialect.firstDataLine));
  const failed = mayReadBytes(data, spec.dialect)
    ? readBytes(bytes, data, spec, collector)
    : readText(bytes, spec, collector);
  if (failed) return failed;
  const trajectories = collector.trajectories();
  const summary = summarise(trajectories, collector.problemCount);
  // Rows without a whole position keep their place, but a file of nothing else says nothing.
  if (summary.tracks === 0) return nothingRead(collector, spec);
  const contradiction = contradictionOf(trajectories, spec.frameInterval);
  if (contradiction) return contradiction;
  return {
    failed: false,
    trajectories,
    summary,
    problems: collector.problems,
    problemCount: collector.problemCount,
    paths: previewPaths(trajectories),
  };
}

function nothingRead({ problems: [first] }: RowCollector, { dialect }: ReadingSpec): IntakeFailure {
  return intakeFailure(
    'no-rows',
    `Not one row could be read with these columns${first ? ` (line ${first.line}: ${first.reason})` : ''}. Check which columns were chosen, and the decimal mark.`,
    first?.line ?? dialect.firstDataLine,
  );
}

/** How rows come: from a text, or straight from bytes. */
type RowSource = (visitor: RowVisitor, width: () => number | null) => IntakeFailure | null;

/** Quoted cells, and encodings of several bytes a letter: as a text. */
function readText(bytes: Uint8Array, spec: ReadingSpec, collector: RowCollector): IntakeFailure | null {
  const decoded = decodeFile(bytes, spec.dialect.encoding);
  if ('failed' in decoded) return decoded;
  const text = withPlainBreaks(decoded.text);
  if (typeof text !== 'string') return text;
  return readRows(spec, collector, (visitor) => eachRow(text, spec.dialect, visitor));
}

/** Everything else: the lines above the data as a text, the data from their bytes. */
function readBytes(
  bytes: Uint8Array,
  data: Uint8Array,
  spec: ReadingSpec,
  collector: RowCollector,
): IntakeFailure | null {
  const unfit = unfitBytes(bytes, spec.dialect.encoding);
  if (unfit) return unfit;
  const head = bytes.subarray(0, bytes.length - data.length);
  const decoded = head.length === 0 ? { text: '' } : decodeFile(head, spec.dialect.encoding);
  if ('failed' in decoded) return decoded;
  const text = withPlainBreaks(decoded.text);
  if (typeof text !== 'string') return text;
  const rows = {
    track: spec.columns.track,
    numbers: collector.numberColumns,
    take: (id: string, values: Float64Array) => collector.addNumbers(id, values),
  };
  return readRows(
    spec,
    collector,
    (visitor, width) =>
      eachRow(text, spec.dialect, visitor) ?? eachByteRow(data, spec.dialect, { ...rows, width }, visitor),
  );
}

function readRows(spec: ReadingSpec, collector: RowCollector, source: RowSource): IntakeFailure | null {
  const { dialect } = spec;
  const header = new RepeatedHeader(dialect);
  const early = new EarlyRows(dialect);
  let width = 0;
  let settled = false;
  let missing: IntakeFailure | null = null;
  const visitor: RowVisitor = {
    fault: (line, reason, shown) => {
      if (line < dialect.firstDataLine) early.remember(line, () => reason, shown);
      else collector.addProblem(line, reason, shown);
    },
    row: ({ line, cells }, shown) => {
      if (line < dialect.firstDataLine) {
        header.remember(line, cells);
        early.remember(line, () => wrongWidth(cells, width), shown());
        // Cut at blanks, names with a unit behind them are more cells than there are columns.
        if (line === dialect.headerLine && dialect.delimiter !== ' ') width = cells.length;
        return;
      }
      if (!settled) {
        width = Math.max(width, cells.length);
        missing = checkColumns(spec, width);
        if (missing) return false;
        early.tell(collector);
      }
      settled = true;
      if (header.isAgain(cells)) collector.addProblem(line, 'the header again', shown());
      else if (misfit(cells, width, dialect.delimiter))
        collector.addProblem(line, wrongWidth(cells, width), shown());
      else collector.add(line, cells, shown);
      return;
    },
  };
  const failed = source(visitor, () => (settled ? width : null));
  return missing ?? failed;
}

const wrongWidth = (cells: readonly string[], width: number) =>
  cells.length === width
    ? 'stands above the first line of data'
    : `${cells.length} cells instead of ${width}`;

/** Rows between the names and the first row of data: they could not be made out, and are listed once the width is known. */
class EarlyRows {
  private readonly rows: { line: number; reason: () => string; text: string }[] = [];
  private readonly after: number;

  constructor({ headerLine, unitsLine }: Dialect) {
    this.after = headerLine === null ? Infinity : Math.max(headerLine, unitsLine ?? 0);
  }

  remember(line: number, reason: () => string, text: string): void {
    if (line > this.after) this.rows.push({ line, reason, text });
  }

  tell(collector: RowCollector): void {
    for (const { line, reason, text } of this.rows) collector.addProblem(line, reason(), text);
  }
}

/** A header or a row of units that stands in the middle of a file, as where two files were joined. */
class RepeatedHeader {
  private readonly seen: (readonly string[])[] = [];

  constructor(private readonly dialect: Dialect) {}

  remember(line: number, cells: readonly string[]): void {
    if (line === this.dialect.headerLine || line === this.dialect.unitsLine) this.seen.push(cells);
  }

  isAgain(cells: readonly string[]): boolean {
    return this.seen.some(
      (row) => row.length === cells.length && row.every((cell, at) => cell === cells[at]),
    );
  }
}

/**
 * A row with more cells than the table has columns was cut wrongly, perhaps at a comma inside a number; empty cells at the end
 * do not count. Cut at blanks, an empty cell leaves no trace, so there a row with fewer cells has them in the wrong places.
 */
function misfit(cells: readonly string[], width: number, delimiter: Dialect['delimiter']): boolean {
  if (cells.length === width) return false;
  if (delimiter === ' ') return true;
  return cells.length > width && cells.slice(width).some((cell) => cell !== '');
}
