import { describe, expect, test } from 'vitest';
import { inspectFile } from '../../../analysis/intake/inspect-file';
import { goldenCase, goldenNames } from '../golden';
import { bytesOf, golden, inspect, read, refusal, utf16, values } from './files';

/** What is understood of a file without asking anybody. */
const rows = (separator: string, decimal = '.') =>
  Array.from({ length: 6 }, (_, i) =>
    [1, (i * 0.5).toFixed(1), (i * 1.25).toFixed(2), (3 - i * 0.75).toFixed(2)]
      .join(separator)
      .replaceAll('.', decimal),
  ).join('\n');

describe('the way a table is written', () => {
  test.each([
    ['comma', ',', '.'],
    ['semicolon', ';', '.'],
    ['semicolon', ';', ','],
    ['tab', '\t', '.'],
    ['tab', '\t', ','],
    ['blanks', '   ', '.'],
  ])('%s between cells (%j), decimal mark %s', (_, separator, decimal) => {
    const text = `${['track', 'time', 'x', 'y'].join(separator)}\n${rows(separator, decimal)}\n`;
    const { spec, required } = inspect(text);
    expect(spec.dialect).toMatchObject({
      delimiter: separator.startsWith(' ') ? ' ' : separator,
      decimal,
      headerLine: 1,
      firstDataLine: 2,
    });
    expect(spec.columns).toEqual({ track: 0, time: 1, frame: null, x: 2, y: 3, z: null });
    expect(required).toEqual([]);
    expect(values(read(text)).axes[0]).toEqual([0, 1.25, 2.5, 3.75, 5, 6.25]);
  });

  test('remarks and blank lines above, units in a row of their own below the names', () => {
    const text = `# taken on the left microscope\n\n# lamp at 40 %\nparticle;t;x;y\n;ms;nm;nm\n${rows(';')}\n`;
    const { spec } = inspect(text);
    expect(spec.dialect).toMatchObject({ comment: '#', headerLine: 4, unitsLine: 5, firstDataLine: 6 });
    expect(spec.units).toEqual({ time: 'ms', x: 'nm', y: 'nm', z: null });
    const got = values(read(text));
    expect(got.time).toEqual([0, 0.0005, 0.001, 0.0015, 0.002, 0.0025]);
    expect(got.axes[0]![1]).toBe(1.25 / 1000);
  });

  test.each([
    ['µm', 'um'],
    ['μm', 'um'],
    ['um', 'um'],
    ['micrometre', 'um'],
    ['nm', 'nm'],
    ['mm', 'mm'],
    ['px', 'px'],
    ['pixel', 'px'],
  ])('a unit in brackets: x (%s)', (written, unit) => {
    expect(inspect(`id,t (s),x (${written}),y [${written}]\n${rows(',')}\n`).spec.units).toMatchObject({
      x: unit,
      y: unit,
      time: 's',
    });
  });

  test('UTF-8 with a byte-order mark, UTF-16 of both orders, and Windows-1252 with a note', () => {
    const text = `track,time (s),x (µm),y (µm)\n${rows(',')}\n`;
    for (const bytes of [bytesOf(`\ufeff${text}`), utf16(text, 'le'), utf16(text, 'be')])
      expect(inspect(bytes).spec.units.x).toBe('um');
    const western = Uint8Array.from(text, (letter) => letter.charCodeAt(0));
    const found = inspect(western);
    expect(found.spec.dialect.encoding).toBe('windows-1252');
    expect(found.spec.units.x).toBe('um');
    expect(found.notes.join(' ')).toContain('Windows-1252');
  });

  test('a table without names', () => {
    const { spec, columns } = inspect(`${rows(',')}\n`);
    expect(spec.dialect).toMatchObject({ headerLine: null, firstDataLine: 1 });
    expect(columns[0]!.name).toBe('column 1');
    expect([spec.columns.x, spec.columns.y]).not.toContain(null);
  });
});

describe('what the columns are for', () => {
  test.each([
    ['track,frame,x,y', { track: 0, frame: 1, x: 2, y: 3 }],
    ['frame,x,y,track', { frame: 0, x: 1, y: 2, track: 3 }],
    ['Particle ID,Time,X,Y', { track: 0, time: 1, x: 2, y: 3 }],
    ['t,x position,y position,bead', { time: 0, x: 1, y: 2, track: 3 }],
    ['x,y,time,particle', { x: 0, y: 1, time: 2, track: 3 }],
  ])('%s', (header, roles) => {
    const names = header.split(',');
    const time = names.findIndex((name) => /^t(ime)?$/i.test(name));
    const body = Array.from({ length: 6 }, (_, i) =>
      names
        .map((name, at) =>
          /frame/i.test(name) ? i : at === time ? i * 0.1 : /track|part|bead/i.test(name) ? 1 : (i * 1.3) % 4,
        )
        .join(','),
    ).join('\n');
    expect(inspect(`${header}\n${body}\n`).spec.columns).toMatchObject(roles);
  });

  test('a third axis, and a single one', () => {
    expect(inspect('track,t,x,y,z\n1,0,1,2,3\n1,1,2,3,4\n1,2,3,4,6\n').spec.columns.z).toBe(4);
    expect(inspect('track,t,x\n1,0,1.5\n1,1,2.25\n1,2,3.5\n').spec.columns).toMatchObject({
      x: 2,
      y: null,
      z: null,
    });
  });

  test('what is missing is asked for: the interval of frames, the size of pixels', () => {
    const { required } = inspect('track,frame,x (px),y (px)\n1,0,1,2\n1,1,2,3\n1,2,3,5\n');
    expect([...required].sort()).toEqual(['frameInterval', 'pixelSize']);
  });

  test('what is assumed is said: a file without units is in µm and s', () => {
    const { assumed, notes } = inspect('track,t,x,y\n1,0,1,2\n1,1,2,3\n1,2,3,5\n');
    expect(assumed).toEqual(expect.arrayContaining(['lengthUnit', 'exposure']));
    expect(notes.join(' ')).toMatch(/µm|micromet/);
  });
});

describe('golden files are taken in whole', () => {
  test.each(goldenNames)('%s', (name) => {
    const { file } = goldenCase(name);
    const stated = name === 'g13_pixels_frames' ? { frameInterval: '0.04', pixelSize: '0.107' } : {};
    const outcome = read(golden(file), stated);
    expect(outcome.problemCount).toBe(0);
    const lines = new TextDecoder().decode(golden(file)).trim().split('\n').length - 1;
    expect(outcome.summary.rows).toBe(lines);
    expect(outcome.summary.dims).toBe(goldenCase(name).reference.msd_axis.length);
    // Every value is that of its text.
    const [head, ...body] = new TextDecoder().decode(golden(file)).trim().split('\n');
    const column = head!.split(',').findIndex((cell) => cell.startsWith('x'));
    if (!head!.includes('px'))
      expect([...outcome.trajectories.axes[0]!]).toEqual(body.map((line) => Number(line.split(',')[column])));
  });
});

describe('what is no table of positions gets an explanation', () => {
  test.each([
    [
      'a PNG picture',
      Uint8Array.of(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13),
      /picture|image/i,
    ],
    ['a JPEG picture', Uint8Array.of(0xff, 0xd8, 0xff, 0xe0, 0, 16), /picture|image|photo/i],
    ['a PDF', bytesOf('%PDF-1.7\n1 0 obj'), /PDF/],
    ['a zip or spreadsheet', Uint8Array.of(0x50, 0x4b, 3, 4, 20, 0), /zip|spreadsheet|archive/i],
    ['a gzip archive', Uint8Array.of(0x1f, 0x8b, 8, 0), /gzip|compress/i],
    ['nothing', new Uint8Array(0), /empty/],
    ['zero bytes', new Uint8Array(200), /zero byte|UTF-16|plain text/],
  ])('%s', (_, bytes, reason) => {
    const found = refusal(bytes);
    expect(found.message).toMatch(reason);
    // What to do is said too.
    expect(found.message).toMatch(/[.] \w/);
  });

  test.each([
    ['only names', 'track,t,x,y\n'],
    ['one column', 'x\n1\n2\n3\n'],
    ['prose', 'Dear colleague,\nthe tracks, as promised, are coming tomorrow.\nYours\n'],
    ['a page', '<!doctype html>\n<html><body><table><tr><td>1</td></tr></table></body></html>\n'],
    ['blank lines', '\n\n\n   \n'],
  ])('%s', (_, text) => {
    const found = inspectFile(bytesOf(text), 'tracks.csv');
    if (!found.failed) throw new Error(`read as ${JSON.stringify(found.spec)}`);
    expect(found.message.length).toBeGreaterThan(40);
  });
});

describe('hostile content', () => {
  test('formulas and scripts are cells like any other: no number, and listed as such', () => {
    const outcome = read('track,t,x,y\n1,0,1,2\n1,1,=1+1,3\n1,2,3,<script>\n1,3,4,5\n');
    expect(outcome.problems.map(({ line }) => line)).toEqual([3, 4]);
    expect(outcome.problems[0]!.reason).toContain('=1+1');
  });

  test('names such as __proto__ and constructor are names', () => {
    const text = '__proto__,t,x,y\nconstructor,0,1,2\n__proto__,0,2,3\nconstructor,1,2,3\n__proto__,1,5,5\n';
    const found = inspect(text);
    expect(found.columns[0]!.name).toBe('__proto__');
    expect(
      values(read(text, {}, (spec) => ({ ...spec, columns: { ...spec.columns, track: 0 } }))).tracks,
    ).toEqual(['constructor', '__proto__', 'constructor', '__proto__']);
  });

  test('a quotation mark that is never closed costs its row and no other', () => {
    const outcome = read('track,t,x,y\n1,0,1,2\n1,1,"2,3\n1,2,3,4\n1,3,4,5\n');
    expect(outcome.summary.rows).toBeGreaterThanOrEqual(3);
    expect(outcome.problemCount).toBeGreaterThan(0);
  });

  test('thousands of columns, and a line of two million characters, are refused by name', () => {
    expect(refusal(`${Array.from({ length: 1500 }, (_, i) => i).join(',')}\n`.repeat(3)).message).toMatch(
      /1500 columns/,
    );
    expect(refusal(`track,t,x,y\n${'1'.repeat(2 * 1024 * 1024)}\n`).message).toMatch(/million characters/);
  });
});
