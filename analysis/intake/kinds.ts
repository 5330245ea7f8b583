interface Kind {
  readonly start: readonly number[];
  readonly is: string;
  readonly remedy: string;
}

const EXPORT_TRACKS = 'Export the tracks as text (CSV) from the program that made them.';
const FIND_PARTICLES = 'Find the particles first, then export their tracks as text (CSV).';
const SAVE_AS_CSV = 'Save the sheet as CSV, then add that file.';
const UNPACK = 'Unpack it first, then add the text file inside.';

const bytesOf = (text: string) => Array.from(text, (letter) => letter.charCodeAt(0));

/**
 * First bytes of kinds of file that are dropped by mistake. Sources: PNG (W3C, 5.2), JPEG (ITU-T T.81, B.1.1.3), TIFF 6.0
 * section 2, GZIP (RFC 1952, 2.3.1), PDF (ISO 32000-1, 7.5.2), Zstandard (RFC 8878, 3.1.1); the rest common practice, no source.
 */
const KINDS: readonly Kind[] = [
  { start: [0x89, ...bytesOf('PNG')], is: 'a picture (PNG)', remedy: EXPORT_TRACKS },
  { start: [0xff, 0xd8, 0xff], is: 'a picture (JPEG)', remedy: EXPORT_TRACKS },
  { start: bytesOf('GIF8'), is: 'a picture (GIF)', remedy: EXPORT_TRACKS },
  { start: [...bytesOf('II'), 0x2a, 0x00], is: 'a picture stack (TIFF)', remedy: FIND_PARTICLES },
  { start: [...bytesOf('MM'), 0x00, 0x2a], is: 'a picture stack (TIFF)', remedy: FIND_PARTICLES },
  { start: [...bytesOf('II'), 0x2b, 0x00], is: 'a picture stack (large TIFF)', remedy: FIND_PARTICLES },
  { start: [...bytesOf('MM'), 0x00, 0x2b], is: 'a picture stack (large TIFF)', remedy: FIND_PARTICLES },
  { start: bytesOf('RIFF'), is: 'a film or a sound (RIFF)', remedy: FIND_PARTICLES },
  { start: bytesOf('%PDF'), is: 'a PDF document', remedy: EXPORT_TRACKS },
  { start: [0xd0, 0xcf, 0x11, 0xe0], is: 'an old spreadsheet or document', remedy: SAVE_AS_CSV },
  { start: [0x1f, 0x8b], is: 'a compressed file (gzip)', remedy: `Compressed files come later. ${UNPACK}` },
  { start: bytesOf('BZh'), is: 'a compressed file (bzip2)', remedy: UNPACK },
  { start: [0xfd, ...bytesOf('7zXZ')], is: 'a compressed file (xz)', remedy: UNPACK },
  { start: [0x28, 0xb5, 0x2f, 0xfd], is: 'a compressed file (zstd)', remedy: UNPACK },
  { start: [0x37, 0x7a, 0xbc, 0xaf], is: 'a compressed archive (7z)', remedy: UNPACK },
  { start: [0x89, ...bytesOf('HDF')], is: 'a binary data container (HDF5)', remedy: EXPORT_TRACKS },
  { start: bytesOf('{\\rtf'), is: 'a formatted text document (RTF)', remedy: 'Save it as plain text.' },
];

/** Part names inside an archive that tell what it is: ISO/IEC 29500-2 (sheets, texts), OpenDocument 1.2 part 3 (sheets). */
const SHEET_PARTS = ['xl/', 'opendocument.spreadsheet'];
const TEXT_PARTS = ['word/', 'opendocument.text'];

/** What bytes that are no text seem to be, and what to do about it; null when their start is nothing known. */
export function recogniseKind(bytes: Uint8Array): { is: string; remedy: string } | null {
  if (startsWith(bytes, bytesOf('PK\x03\x04')) || startsWith(bytes, bytesOf('PK\x05\x06')))
    return inArchive(bytes);
  return KINDS.find((kind) => startsWith(bytes, kind.start)) ?? null;
}

const startsWith = (bytes: Uint8Array, start: readonly number[]) =>
  start.every((byte, at) => bytes[at] === byte);

function inArchive(bytes: Uint8Array): { is: string; remedy: string } {
  let names = '';
  for (const byte of bytes.subarray(0, 4096)) names += String.fromCharCode(byte);
  // The list of all parts stands at the end of an archive.
  for (const byte of bytes.subarray(Math.max(4096, bytes.length - 4096))) names += String.fromCharCode(byte);
  if (SHEET_PARTS.some((part) => names.includes(part))) return { is: 'a spreadsheet', remedy: SAVE_AS_CSV };
  if (TEXT_PARTS.some((part) => names.includes(part)))
    return { is: 'a text document', remedy: EXPORT_TRACKS };
  return { is: 'a zip archive', remedy: UNPACK };
}
