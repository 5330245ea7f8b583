import { describe, expect, test } from 'vitest';
import { attachmentDisposition, safeName } from '../../../db/files/safe-name';

describe('a name for a file', () => {
  test.each([
    ['tracks.csv', 'tracks.csv'],
    ['Größe 2 µm (day 3).csv', 'Größe 2 µm (day 3).csv'],
    ['粒子 追跡.csv', '粒子 追跡.csv'],
    ['  around .csv  ', 'around .csv'],
    ['../../etc/passwd', '....etcpasswd'],
    ['C:\\data\\tracks.csv', 'C:datatracks.csv'],
    ['two\r\nlines\t.csv', 'twolines.csv'],
    ['zero\0byte.csv', 'zerobyte.csv'],
    ['\u007f\u0085\u009fc1.csv', 'c1.csv'],
    ['\ufeffmark.csv', 'mark.csv'],
    // Composed and decomposed are the same name (Unicode normal form C).
    ['Gro\u0308\u00dfe.csv', 'Gr\u00f6\u00dfe.csv'],
    ['', 'file'],
    ['.', 'file'],
    ['..', 'file'],
    ['///', 'file'],
    ['\u202e', 'file'],
  ])('%j becomes %j', (given, kept) => {
    expect(safeName(given)).toBe(kept);
  });

  test('no mark that turns the reading direction is left', () => {
    // All characters with the property Bidi_Control, Unicode 16, PropList.txt (from memory), with the separators beside them.
    const marks = [
      ...[0x061c, 0x200e, 0x200f, 0x202a, 0x202b, 0x202c, 0x202d, 0x202e, 0x2066, 0x2067, 0x2068, 0x2069],
      ...[0x2028, 0x2029, 0x200b],
    ];
    for (const mark of marks) {
      const given = `tracks${String.fromCodePoint(mark)}vsc.exe`;
      expect([mark.toString(16), safeName(given)]).toEqual([mark.toString(16), 'tracksvsc.exe']);
    }
  });

  test('a very long one is cut to 200 characters, whole ones, and keeps its ending', () => {
    expect(safeName(`${'a'.repeat(300)}.csv`)).toBe(`${'a'.repeat(196)}.csv`);
    expect(safeName('a'.repeat(300))).toBe('a'.repeat(200));
    expect(safeName(`a.${'b'.repeat(300)}`)).toBe(`a.${'b'.repeat(198)}`);
    const faces = safeName(`${'\u{1f52c}'.repeat(300)}.csv`);
    expect([...faces]).toHaveLength(200);
    expect(faces.isWellFormed()).toBe(true);
    expect(safeName('a'.repeat(200))).toBe('a'.repeat(200));
  });

  test('what is half a character is none; a safe name stays what it is', () => {
    for (const given of [
      '\ud800.csv',
      'a\udc00',
      `${'x'.repeat(198)}\u{1f52c}\u{1f52c}\u{1f52c}.csv`,
      '../a\u202eb',
    ]) {
      const name = safeName(given);
      expect(name.isWellFormed()).toBe(true);
      expect(safeName(name)).toBe(name);
    }
  });
});

describe('the header of a download', () => {
  /** Reads the header as RFC 6266 and RFC 8187 say: the extended form wins. */
  function readName(header: string): { plain: string; name: string } {
    const parts = /^attachment; filename="([^"\\]*)"; filename\*=UTF-8''([A-Za-z0-9!#$&+.^_`|~%-]*)$/.exec(
      header,
    );
    if (!parts) throw new Error(`not a header: ${header}`);
    return { plain: parts[1]!, name: decodeURIComponent(parts[2]!) };
  }

  test.each([
    'tracks.csv',
    'Größe 2 µm.csv',
    '粒子.csv',
    'quote " and \\ and %41.csv',
    "it's (a) *star*.csv",
    '; filename=evil.exe',
    'evil.html"; filename="good.csv',
    '\u{1f52c}.csv',
    'x'.repeat(200),
  ])('gives %j back, and nothing but letters that a header may have', (name) => {
    const header = attachmentDisposition(safeName(name));
    expect(header).toMatch(/^[\x20-\x7e]*$/);
    expect(() => new Headers({ 'Content-Disposition': header })).not.toThrow();
    expect(readName(header).name).toBe(safeName(name));
  });

  test('line ends in a name cannot begin another header', () => {
    const header = attachmentDisposition('a\r\nSet-Cookie: b=c\u2028.csv');
    expect(header).toMatch(/^[\x20-\x7e]*$/);
    expect(readName(header).plain).toBe('a__Set-Cookie: b=c_.csv');
  });
});
