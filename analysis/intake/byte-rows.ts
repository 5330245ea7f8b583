import { decodeWindows1252 } from './encodings';
import { intakeFailure } from './failure';
import { MAX_LINE_CHARACTERS } from './limits';
import { readNumber } from './number';
import { asRow, type RowVisitor } from './rows';
import type { Dialect, IntakeFailure } from './types';

/** What a plain row is read for: the columns that play a part, and what is done with their values. */
export interface PlainRows {
  /** Cells of every row of data; asked anew at each row, because the first ones settle it. null: not settled yet. */
  width(): number | null;
  /** Column of the track; null: there is one track. */
  readonly track: number | null;
  /** Columns of numbers, in the order in which `take` gets them. */
  readonly numbers: readonly number[];
  /**
   * Takes a row of plain numbers. @param id - of its track; the same object for the same bytes in a row.
   * @returns false when there is something to say about the row, which then goes the slow way.
   */
  take(id: string, values: Float64Array): boolean;
}

const [NEWLINE, RETURN, TAB, SPACE, PLUS, MINUS] = [10, 13, 9, 32, 43, 45];
/** Powers of ten that are whole numbers of a double: a division by one rounds once, as the reading of the text does. */
const POWERS = Array.from({ length: 23 }, (_, i) => Number(`1e${i}`));
/** Digits of a whole number that a double always holds exactly. */
const EXACT_DIGITS = 15;

/** Whether rows of data may be read from their bytes: no quotation marks, and bytes below 128 are ASCII. */
export function mayReadBytes(data: Uint8Array, dialect: Dialect): boolean {
  const plain = dialect.encoding === 'utf-8' || dialect.encoding === 'windows-1252';
  return plain && !data.includes(34);
}

/** Where a line begins, from 1 as an editor counts them; the end when there are not so many. */
export function startOfLine(bytes: Uint8Array, line: number): number {
  let at = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0;
  for (let now = 1; now < line && at < bytes.length; at++) {
    if (bytes[at] === NEWLINE || (bytes[at] === RETURN && bytes[at + 1] !== NEWLINE)) now += 1;
  }
  return at;
}

/**
 * Reads rows from the bytes of a file without making a text of them: rows of plain numbers go straight into columns; every
 * other row (names, gaps, exponents, remarks, faults) is cut into cells and handed to `visitor`, as `eachRow` would.
 * @param bytes - of the rows of data; `mayReadBytes` of them is true.
 * @returns a failure that ended the reading, or null. Values are bit-equal to Number(text).
 */
export function eachByteRow(
  bytes: Uint8Array,
  dialect: Dialect,
  plain: PlainRows,
  visitor: RowVisitor,
): IntakeFailure | null {
  return new ByteReader(bytes, dialect, plain, visitor).run();
}

class ByteReader {
  private readonly blanks: boolean;
  private readonly delimiter: number;
  private readonly mark: number;
  private readonly comment: number;
  private readonly roleOf: Int32Array;
  private readonly values: Float64Array;
  private readonly decoder: { decode(bytes: Uint8Array): string };
  private lastTrack: Uint8Array = new Uint8Array(0);
  private lastId = '1';

  constructor(
    private readonly bytes: Uint8Array,
    private readonly dialect: Dialect,
    private readonly plain: PlainRows,
    private readonly visitor: RowVisitor,
  ) {
    this.blanks = dialect.delimiter === ' ';
    this.delimiter = dialect.delimiter.charCodeAt(0);
    this.mark = dialect.decimal.charCodeAt(0);
    this.comment = dialect.comment === null ? -1 : dialect.comment.charCodeAt(0);
    const last = Math.max(...plain.numbers, plain.track ?? 0);
    // What each column is for: −1 nothing, −2 the track, else the place of its value.
    this.roleOf = new Int32Array(last + 1).fill(-1);
    plain.numbers.forEach((column, place) => (this.roleOf[column] = place));
    if (plain.track !== null) this.roleOf[plain.track] = -2;
    this.values = new Float64Array(plain.numbers.length);
    this.decoder =
      dialect.encoding === 'utf-8'
        ? new TextDecoder('utf-8', { fatal: true, ignoreBOM: true })
        : { decode: decodeWindows1252 };
  }

  run(): IntakeFailure | null {
    const { bytes } = this;
    const end = bytes.length;
    let start = 0;
    for (let line = this.dialect.firstDataLine; start < end; line++) {
      const ends = this.plainRow(start);
      if (ends >= 0) {
        start = ends;
        continue;
      }
      let stop = start;
      while (stop < end && bytes[stop] !== NEWLINE && bytes[stop] !== RETURN) stop += 1;
      const failure = this.otherRow(start, stop, line);
      if (failure !== null) return failure === 'stop' ? null : failure;
      start = bytes[stop] === RETURN && bytes[stop + 1] === NEWLINE ? stop + 2 : stop + 1;
    }
    return null;
  }

  /** Reads a row of plain numbers. @returns where the next line begins; −1 when the row is of another kind. */
  private plainRow(start: number): number {
    const width = this.plain.width();
    if (width === null) return -1;
    const { bytes, blanks, delimiter, roleOf } = this;
    const end = bytes.length;
    let at = start;
    let column = 0;
    let id: string | null = this.plain.track === null ? this.lastId : null;
    for (;;) {
      while (at < end && (bytes[at] === SPACE || (bytes[at] === TAB && delimiter !== TAB))) at += 1;
      const role = column < roleOf.length ? roleOf[column]! : -1;
      const first = at;
      if (column === 0 && bytes[at] === this.comment) return -1;
      if (role >= 0) {
        at = this.number(at, role);
        if (at < 0) return -1;
      } else {
        for (; at < end; at++) {
          const byte = bytes[at]!;
          if (byte === NEWLINE || byte === RETURN || byte === delimiter || (blanks && byte === TAB)) break;
          if (byte >= 128) return -1;
        }
        if (role === -2) {
          id = this.idOf(first, at);
          if (id === null) return -1;
        }
      }
      while (at < end && (bytes[at] === SPACE || (bytes[at] === TAB && delimiter !== TAB))) at += 1;
      column += 1;
      const byte = at < end ? bytes[at]! : NEWLINE;
      if (byte === NEWLINE || byte === RETURN) break;
      // Blanks part cells by themselves; any other delimiter is stepped over.
      if (blanks) {
        if (at === first) return -1;
      } else if (byte === delimiter) at += 1;
      else return -1;
    }
    if (column !== width || id === null || !this.plain.take(id, this.values)) return -1;
    return bytes[at] === RETURN && bytes[at + 1] === NEWLINE ? at + 2 : at + 1;
  }

  /** Reads digits with a decimal mark into `values[place]`. @returns where the cell ends; −1 for anything else. */
  private number(from: number, place: number): number {
    const { bytes, mark, delimiter } = this;
    const end = bytes.length;
    let at = from;
    const negative = bytes[at] === MINUS;
    if (negative || bytes[at] === PLUS) at += 1;
    let mantissa = 0;
    let digits = 0;
    let decimals = -1;
    let seen = 0;
    for (; at < end; at++) {
      const byte = bytes[at]!;
      if (byte >= 48 && byte <= 57) {
        seen += 1;
        // Zeros in front take no room in the whole number.
        if (digits > 0 || byte !== 48) digits += 1;
        mantissa = mantissa * 10 + byte - 48;
        if (decimals >= 0) decimals += 1;
      } else if (byte === mark && decimals < 0) decimals = 0;
      else break;
    }
    if (seen === 0) return -1;
    const byte = at < end ? bytes[at]! : NEWLINE;
    const closed =
      byte === NEWLINE || byte === RETURN || byte === delimiter || byte === SPACE || byte === TAB;
    if (closed && digits <= EXACT_DIGITS && decimals <= 22) {
      const value = decimals > 0 ? mantissa / POWERS[decimals]! : mantissa;
      this.values[place] = negative ? -value : value;
      return at;
    }
    return this.longNumber(from, place);
  }

  /** A number with an exponent or more digits than fit: read from its text. */
  private longNumber(from: number, place: number): number {
    const { bytes, delimiter } = this;
    let at = from;
    let text = '';
    for (; at < bytes.length && at - from < 400; at++) {
      const byte = bytes[at]!;
      if (byte === NEWLINE || byte === RETURN || byte === delimiter || byte === SPACE || byte === TAB) break;
      if (byte >= 128) return -1;
      text += String.fromCharCode(byte);
    }
    const value = readNumber(text, this.dialect.decimal);
    if (Number.isNaN(value)) return -1;
    this.values[place] = value;
    return at;
  }

  /** The id between two places; rows of one track stand together, so it is mostly the one before. */
  private idOf(from: number, to: number): string | null {
    const { bytes } = this;
    let stop = to;
    while (stop > from && (bytes[stop - 1] === SPACE || bytes[stop - 1] === TAB)) stop -= 1;
    if (stop === from) return null;
    const length = stop - from;
    if (length === this.lastTrack.length) {
      let same = true;
      for (let i = 0; i < length && same; i++) same = bytes[from + i] === this.lastTrack[i];
      if (same) return this.lastId;
    }
    this.lastTrack = bytes.slice(from, stop);
    this.lastId = String.fromCharCode(...this.lastTrack.subarray(0, 1000));
    if (length > 1000) return null;
    return this.lastId;
  }

  /** Any other row, the way that texts go. */
  private otherRow(start: number, stop: number, line: number): IntakeFailure | 'stop' | null {
    if (stop - start > MAX_LINE_CHARACTERS * 4) return lineTooLong(line);
    let text: string;
    try {
      text = this.decoder.decode(this.bytes.subarray(start, stop));
    } catch {
      return intakeFailure(
        'encoding',
        `The file should be UTF-8, but line ${line} has a byte that is not. Save it again as UTF-8 text, then add it.`,
        line,
      );
    }
    if (text.length > MAX_LINE_CHARACTERS) return lineTooLong(line);
    const row = asRow(text, this.dialect, line);
    if (row === null) return null;
    if ('failed' in row) return row;
    return this.visitor.row(row, () => text.slice(0, 200)) === false ? 'stop' : null;
  }
}

function lineTooLong(line: number): IntakeFailure {
  return intakeFailure(
    'line-too-long',
    `Line ${line} has more than a million characters, so this is hardly a table. Check that the file has line breaks.`,
    line,
  );
}
