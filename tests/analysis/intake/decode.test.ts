import { describe, expect, test } from 'vitest';
import { decodeFile, tooBig } from '../../../analysis/intake/decode';
import { MAX_BYTES } from '../../../analysis/intake/limits';
import { bytesOf, inspect, read, refusal, tryRead, utf16, values } from './files';

const TABLE = 'track,time (s),x (µm),y (µm)\n1,0,0.5,-1\n1,0.1,0.75,2e-3\n';

function failureOf(bytes: Uint8Array) {
  const decoded = decodeFile(bytes);
  if (!('failed' in decoded)) throw new Error('decoded');
  return decoded;
}

describe('encodings', () => {
  const plain = values(read(TABLE));

  test.each([
    ['UTF-8', bytesOf(TABLE), 'utf-8'],
    ['UTF-8 with a byte-order mark', bytesOf(`\ufeff${TABLE}`), 'utf-8'],
    ['UTF-16, low byte first', utf16(TABLE, 'le'), 'utf-16le'],
    ['UTF-16, high byte first', utf16(TABLE, 'be'), 'utf-16be'],
  ] as const)('%s is understood and changes no value', (_, bytes, encoding) => {
    const inspection = inspect(bytes);
    expect(inspection.spec.dialect.encoding).toBe(encoding);
    expect(inspection.columns.map((column) => column.name)).toEqual(['track', 'time', 'x', 'y']);
    expect(inspection.spec.units).toEqual({ time: 's', x: 'um', y: 'um', z: null });
    expect(values(read(bytes))).toEqual(plain);
  });

  test('bytes that are no UTF-8 are offered as Windows-1252, with the line of the first one', () => {
    // 0xB5 is the micro sign in Windows-1252 (WHATWG Encoding Standard, index-windows-1252).
    const bytes = Uint8Array.from(TABLE, (letter) => letter.charCodeAt(0));
    const inspection = inspect(bytes);
    expect(inspection.spec.dialect.encoding).toBe('windows-1252');
    expect(inspection.spec.units.x).toBe('um');
    expect(inspection.notes.join(' ')).toContain('byte 0xB5 in line 1');
    expect(values(read(bytes))).toEqual(plain);
  });

  test('Windows-1252 is that, not ISO 8859-1: 0x80 is the euro sign, 0x93 a quotation mark', () => {
    const bytes = new Uint8Array([
      ...bytesOf('track,t,x\n'),
      0x80,
      ...bytesOf(',0,1\n'),
      0x93,
      0xe9,
      ...bytesOf(',1,2\n'),
    ]);
    expect(values(read(bytes)).tracks).toEqual(['€', '“é']);
  });

  test('a byte-order mark binds: what follows must be in that encoding', () => {
    const broken = new Uint8Array([0xef, 0xbb, 0xbf, ...bytesOf('t,x\n0,1\n1,'), 0xe9]);
    expect(refusal(broken)).toMatchObject({ code: 'encoding', line: 3 });
    expect(refusal(utf16(TABLE, 'le').subarray(0, 41))).toMatchObject({ code: 'encoding' });
  });

  test('a reading that states UTF-8 refuses other bytes and names the line', () => {
    const bytes = new Uint8Array([...bytesOf('t,x\n0,1\n1,2\n'), 0xff]);
    const spec = { ...inspect('t,x\n0,1\n1,2\n').spec };
    expect(tryRead(bytes, {}, () => spec)).toMatchObject({ failed: true, code: 'encoding', line: 4 });
  });

  test('UTF-16 without a byte-order mark is not guessed', () => {
    const failure = failureOf(utf16('t,x\n0,1\n1,2\n', 'le').subarray(2));
    expect(failure).toMatchObject({ code: 'encoding' });
    expect(failure.message).toContain('UTF-16');
  });

  // Unicode Standard, table 3-7: overlong, surrogate, beyond U+10FFFF, cut short. None may become U+FFFD.
  test.each([
    [0xc0, 0xaf],
    [0xe0, 0x80, 0x80],
    [0xed, 0xa0, 0x80],
    [0xf4, 0x90, 0x80, 0x80],
    [0xe2, 0x82],
  ])('ill-formed bytes %i %i are never replaced', (...bad) => {
    const decoded = decodeFile(new Uint8Array([...bytesOf('a\n'), ...bad, ...bytesOf(',b')]));
    if ('failed' in decoded) throw new Error(decoded.message);
    expect(decoded.encoding).toBe('windows-1252');
    expect(decoded.text).not.toContain('\ufffd');
    expect(decoded.note).toContain('line 2');
  });
});

describe('what is no text', () => {
  const pad = (...start: number[]) =>
    new Uint8Array([...start, ...Array.from({ length: 600 }, (_, i) => (i * 37) % 256)]);
  const archive = (name: string) => pad(0x50, 0x4b, 0x03, 0x04, ...new Uint8Array(26), ...bytesOf(name));

  // First bytes as the formats' own specifications give them; see analysis/intake/kinds.ts.
  test.each([
    ['a PNG picture', pad(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a), 'picture (PNG)'],
    ['a JPEG picture', pad(0xff, 0xd8, 0xff, 0xe0), 'picture (JPEG)'],
    ['a GIF picture', pad(...bytesOf('GIF89a')), 'picture (GIF)'],
    ['a TIFF stack', pad(0x49, 0x49, 0x2a, 0x00), 'TIFF'],
    ['a TIFF stack, high byte first', pad(0x4d, 0x4d, 0x00, 0x2a), 'TIFF'],
    ['a large TIFF stack', pad(0x49, 0x49, 0x2b, 0x00), 'TIFF'],
    ['a PDF', pad(...bytesOf('%PDF-1.7\n')), 'PDF'],
    ['a spreadsheet (ISO/IEC 29500)', archive('xl/workbook.xml'), 'a spreadsheet'],
    [
      'a spreadsheet (OpenDocument)',
      archive('mimetypeapplication/vnd.oasis.opendocument.spreadsheet'),
      'a spreadsheet',
    ],
    ['a text document', archive('word/document.xml'), 'a text document'],
    ['a zip archive', archive('tracks.csv'), 'a zip archive'],
    ['an old spreadsheet', pad(0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1), 'old spreadsheet'],
    ['a gzip file', pad(0x1f, 0x8b, 0x08), 'gzip'],
    ['bytes with zeros', new Uint8Array([...bytesOf('t,x\n0,1\n'), 0, 1]), 'zero byte at position 9'],
    ['control characters', Uint8Array.from({ length: 200 }, (_, i) => 1 + (i % 8)), 'control characters'],
  ])('%s is recognised, with what to do', (_, bytes, words) => {
    const failure = refusal(bytes);
    expect(failure.code).toBe('binary');
    expect(failure.message).toContain(words);
    expect(failure.message).toMatch(/CSV|Unpack|Find the particles/);
  });

  test('gzip says that it comes later', () =>
    expect(refusal(pad(0x1f, 0x8b, 8)).message).toMatch(/later.*Unpack/));

  test('an empty file', () => expect(refusal(new Uint8Array(0))).toMatchObject({ code: 'empty' }));

  test('20 MB are read, one byte more is refused with its size and a remedy', () => {
    expect(MAX_BYTES).toBe(20 * 1024 * 1024);
    const bytes = new Uint8Array(MAX_BYTES + 1).fill(10);
    bytes.set(bytesOf('t,x\n0,1\n1,2\n'));
    expect(refusal(bytes)).toMatchObject({ code: 'too-big' });
    expect(refusal(bytes).message).toMatch(/20\.0 MB; up to 20 MB.*split/);
    expect(values(read(bytes.subarray(0, MAX_BYTES))).time).toEqual([0, 1]);
    expect(tooBig(3 * 1024 ** 3).message).toContain('3072 MB');
  });
});
