import { decodeWindows1252, firstNonUtf8, lineOfByte } from './encodings';
import { intakeFailure } from './failure';
import { recogniseKind } from './kinds';
import { HEAD_CHARACTERS, MAX_BYTES } from './limits';
import type { Dialect, IntakeFailure } from './types';

export interface DecodedText {
  readonly text: string;
  readonly encoding: Dialect['encoding'];
  /** Something to tell the person; null when all was plain. */
  readonly note: string | null;
}

/**
 * The text of a file. A byte that does not fit is never replaced silently: without a byte-order mark the whole file is then
 * offered as Windows-1252, with a note that names the line.
 * @param encoding - the one that a reading states; omitted: found from the bytes.
 */
export function decodeFile(bytes: Uint8Array, encoding?: Dialect['encoding']): DecodedText | IntakeFailure {
  const unfit = unfitBytes(bytes, encoding);
  if (unfit) return unfit;
  const mark = byteOrderMark(bytes);
  const wanted = encoding ?? mark ?? 'utf-8';
  if (wanted === 'windows-1252') return { text: decodeWindows1252(bytes), encoding: wanted, note: null };
  try {
    const text = new TextDecoder(wanted, { fatal: true }).decode(bytes);
    // One byte-order mark belongs to the encoding; a second one only hides in the first column's name.
    return { text: text.startsWith('\ufeff') ? text.slice(1) : text, encoding: wanted, note: null };
  } catch {
    return undecodable(bytes, wanted, encoding === undefined && mark === null);
  }
}

function undecodable(
  bytes: Uint8Array,
  wanted: Exclude<Dialect['encoding'], 'windows-1252'>,
  guessed: boolean,
): DecodedText | IntakeFailure {
  const name = wanted.toUpperCase();
  if (wanted !== 'utf-8') {
    return intakeFailure(
      'encoding',
      `The file should be ${name} but is damaged or cut short. Save it again as UTF-8 text, then add it.`,
    );
  }
  const place = firstNonUtf8(bytes);
  const line = lineOfByte(bytes, place);
  const byte = `0x${(bytes[place] ?? 0).toString(16).toUpperCase().padStart(2, '0')}`;
  if (!guessed) {
    return intakeFailure(
      'encoding',
      `The file should be UTF-8, but byte ${byte} in line ${line} is not. Save it again as UTF-8 text, then add it.`,
      line,
    );
  }
  return {
    text: decodeWindows1252(bytes),
    encoding: 'windows-1252',
    note: `The file is not UTF-8 (byte ${byte} in line ${line}); it was read as Windows-1252, western European. Check that names and units look right, or save it as UTF-8.`,
  };
}

/** Too many bytes, none, or bytes that are no text. */
export function unfitBytes(
  bytes: Uint8Array,
  encoding: Dialect['encoding'] | undefined,
): IntakeFailure | null {
  if (bytes.length === 0) return intakeFailure('empty', 'The file is empty. Export the tracks again.');
  if (bytes.length > MAX_BYTES) return tooBig(bytes.length);
  const kind = recogniseKind(bytes);
  if (kind) {
    return intakeFailure(
      'binary',
      `This looks like ${kind.is}, not like a table of positions. ${kind.remedy}`,
    );
  }
  const wide =
    encoding === 'utf-16le' || encoding === 'utf-16be' || byteOrderMark(bytes)?.startsWith('utf-16');
  return wide ? null : noPlainText(bytes);
}

/** The failure for a file of so many bytes; also for a caller that knows the size before it reads. */
export function tooBig(size: number): IntakeFailure {
  const megabytes = (count: number) => (count / 1024 / 1024).toFixed(count % (1024 * 1024) === 0 ? 0 : 1);
  return intakeFailure(
    'too-big',
    `The file has ${megabytes(size)} MB; up to ${megabytes(MAX_BYTES)} MB can be read at the moment. Export fewer columns or fewer tracks, or split it into several files.`,
  );
}

function noPlainText(bytes: Uint8Array): IntakeFailure | null {
  const zero = bytes.indexOf(0);
  const head = bytes.subarray(0, HEAD_CHARACTERS);
  if (zero >= 0) {
    let zeros = 0;
    for (const byte of head) if (byte === 0) zeros += 1;
    // Plain letters in UTF-16 have a zero in every second byte.
    if (zero < 2 && zeros * 2.5 > head.length) {
      return intakeFailure(
        'encoding',
        'This looks like UTF-16 text without a byte-order mark, which cannot be told from other data. Save it as UTF-8 text, then add it.',
      );
    }
    return intakeFailure(
      'binary',
      `The file has a zero byte at position ${zero + 1}, so it is not plain text. Export the tracks as text (CSV).`,
    );
  }
  let controls = 0;
  for (const byte of head) if ((byte < 32 && (byte < 9 || byte > 13)) || byte === 127) controls += 1;
  return controls * 100 > head.length
    ? intakeFailure(
        'binary',
        'The file is full of control characters, so it is not plain text. Export the tracks as text (CSV).',
      )
    : null;
}

function byteOrderMark(bytes: Uint8Array): 'utf-8' | 'utf-16le' | 'utf-16be' | null {
  if (bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf) return 'utf-8';
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'utf-16le';
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return 'utf-16be';
  return null;
}
