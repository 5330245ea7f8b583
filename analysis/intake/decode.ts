import type { Dialect, IntakeFailure } from './types';
import { MAX_BYTES } from './limits';

export interface DecodedText {
  readonly text: string;
  readonly encoding: Dialect['encoding'];
  /** Something to tell the person; empty when all was plain. */
  readonly note: string;
}

/** First bytes of kinds of file that people drop by mistake, with what to say. Common practice, no source. */
const KINDS: readonly { readonly start: readonly number[]; readonly is: string; readonly remedy: string }[] =
  [
    {
      start: [0x89, 0x50, 0x4e, 0x47],
      is: 'a picture (PNG)',
      remedy: 'Export the tracks as text (CSV) from the program that made them.',
    },
    {
      start: [0xff, 0xd8, 0xff],
      is: 'a picture (JPEG)',
      remedy: 'Export the tracks as text (CSV) from the program that made them.',
    },
    {
      start: [0x49, 0x49, 0x2a, 0x00],
      is: 'a picture stack (TIFF)',
      remedy: 'Find the particles first, then export their tracks as text (CSV).',
    },
    {
      start: [0x4d, 0x4d, 0x00, 0x2a],
      is: 'a picture stack (TIFF)',
      remedy: 'Find the particles first, then export their tracks as text (CSV).',
    },
    {
      start: [0x50, 0x4b, 0x03, 0x04],
      is: 'a zip archive or a spreadsheet',
      remedy: 'Save the sheet as CSV, or unpack the archive, then add that file.',
    },
    {
      start: [0xd0, 0xcf, 0x11, 0xe0],
      is: 'an old spreadsheet or document',
      remedy: 'Save the sheet as CSV, then add that file.',
    },
    {
      start: [0x1f, 0x8b],
      is: 'a compressed file (gzip)',
      remedy: 'Unpack it first, then add the text file inside.',
    },
    {
      start: [0x25, 0x50, 0x44, 0x46],
      is: 'a PDF document',
      remedy: 'Export the tracks as text (CSV) from the program that made them.',
    },
  ];

const fail = (code: IntakeFailure['code'], message: string): IntakeFailure => ({
  failed: true,
  code,
  message,
  line: null,
});

/**
 * The text of a file. Undecodable bytes are never replaced silently: a file that is no UTF-8 is read as Windows-1252 and
 * says so; `encoding` forces the one that a reading states.
 */
export function decodeFile(bytes: Uint8Array, encoding?: Dialect['encoding']): DecodedText | IntakeFailure {
  if (bytes.length === 0) return fail('empty', 'The file is empty. Export the tracks again.');
  if (bytes.length > MAX_BYTES) {
    const size = (bytes.length / 1024 / 1024).toFixed(1);
    return fail(
      'too-big',
      `The file has ${size} MB; up to ${MAX_BYTES / 1024 / 1024} MB can be read at the moment. Export fewer columns or fewer tracks, or split it into several files.`,
    );
  }
  const kind = KINDS.find((one) => one.start.every((byte, at) => bytes[at] === byte));
  if (kind)
    return fail('binary', `This looks like ${kind.is}, not like a table of positions. ${kind.remedy}`);
  const marked = byOrderMark(bytes);
  const wanted = encoding ?? marked ?? 'utf-8';
  if (wanted === 'utf-8' || wanted === 'windows-1252') {
    const zero = bytes.indexOf(0);
    if (zero >= 0) {
      return fail(
        'binary',
        `The file has a zero byte at position ${zero + 1}, so it is not plain text. Export the tracks as text (CSV).`,
      );
    }
  }
  try {
    const text = new TextDecoder(wanted, { fatal: true }).decode(bytes);
    return { text, encoding: wanted, note: wanted === 'windows-1252' && !encoding ? LATIN_NOTE : '' };
  } catch {
    if (encoding) {
      return fail(
        'encoding',
        `The file is not valid ${encoding}. Choose another encoding, or save the file as UTF-8.`,
      );
    }
    if (wanted !== 'utf-8')
      return fail(
        'encoding',
        `The file says it is ${wanted} but is not. Save it as UTF-8, then add it again.`,
      );
    return {
      text: new TextDecoder('windows-1252').decode(bytes),
      encoding: 'windows-1252',
      note: LATIN_NOTE,
    };
  }
}

const LATIN_NOTE =
  'The file is not UTF-8; it was read as Windows-1252 (western European). Check that names and units look right.';

function byOrderMark(bytes: Uint8Array): Dialect['encoding'] | null {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'utf-16le';
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return 'utf-16be';
  return null;
}
