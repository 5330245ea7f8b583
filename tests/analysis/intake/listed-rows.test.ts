import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { MAX_PROBLEM_TEXT, MAX_PROBLEMS_KEPT } from '../../../analysis/intake/limits';
import { readTrajectories } from '../../../analysis/intake/read-trajectories';
import { readingHash } from '../../../db/integrity/addresses';
import { bytesOf, inspect, read, utf16, values } from './files';

/** Nothing is dropped silently: each row is read whole, read as a gap, or listed with its line and reason. */
const GOOD = Array.from({ length: 12 }, (_, i) => `1,${i},${i * 1.5},${i % 5}`);
const HEAD = 'track,t (s),x (µm),y (µm)';
const withRows = (...bad: string[]) =>
  `${[HEAD, ...GOOD.slice(0, 6), ...bad, ...GOOD.slice(6)].join('\n')}\n`;

describe('a row that cannot be used is listed with its line, its reason and its text', () => {
  test.each([
    // No value at all: the row keeps its place as a gap.
    ['1,99,,2', 'x is missing', true],
    ['1,99,1,', 'y is missing', true],
    ['1,99', 'x is missing; y is missing', true],
    ['1,99,NaN,nan', 'x "NaN" says that there is no value; y "nan" says that there is no value', true],
    [
      '1,99,inf,-Infinity',
      'x "inf" says that there is no value; y "-Infinity" says that there is no value',
      true,
    ],
    ['1,99,n/a,1', 'x "n/a" says that there is no value', true],
    // Something else than a number.
    ['1,99,1e400,1', 'x "1e400" is too large', true],
    ['1,99,1,-1e309', 'y "-1e309" is too large', true],
    ['1,99,0x1F,1', 'x "0x1F" is hexadecimal', true],
    ['1,99,1 000,1', 'x "1 000" has a separator between its digits', true],
    ['1,99,"1,000",1', 'x "1,000" has a comma, but the decimal mark here is the point', true],
    ['1,99,"1,234,567",1', 'x "1,234,567" has a separator between its digits', true],
    ['1,99,١٢,1', 'x "١٢" is not a number', true],
    ['1,99,−3,1', 'x "−3" has a minus sign that is not "-"', true],
    ['1,99,=1+1,1', 'x "=1+1" is not a number', true],
    ['1,99,@SUM(A1),1', 'x "@SUM(A1)" is not a number', true],
    ['1,99,1.2.3,1', 'x "1.2.3" is not a number', true],
    ['1,99,12 µm,1', 'x "12 µm" is not a number', true],
    // Without a time or a track there is no place to keep.
    ['1,,1,1', 'time is missing', false],
    ['1,noon,1,1', 'time "noon" is not a number', false],
    ['1,1e400,1,1', 'time "1e400" is too large', false],
    [',99,1,1', 'the track is missing', false],
    ['  ,99,1,1', 'the track is missing', false],
    // Cut wrongly.
    ['1,99,1,1,1', '5 cells instead of 4', false],
    ['1,99,1,5,2,5', '6 cells instead of 4', false],
    [HEAD, 'the header again', false],
    ['end of data', 'time is missing', false],
    ['1,99,"1,1', 'a quotation mark is opened and not closed', false],
    ['1,99,"1"5,1', 'text stands after the closing quotation mark of a cell', false],
  ])('%s', (row, reason, keepsPlace) => {
    const outcome = read(withRows(row));
    expect(outcome.problems).toEqual([{ line: 8, reason, text: row }]);
    expect(outcome.problemCount).toBe(1);
    expect(outcome.summary).toMatchObject({ badRows: 1, rows: keepsPlace ? 13 : 12, frames: 12 });
    // The others are as if it were not there.
    const whole = values(read(withRows()));
    const got = values(outcome);
    const others = (list: readonly number[]) => list.filter((_, at) => !keepsPlace || at !== 6);
    expect(others(got.time!)).toEqual(whole.time);
    expect(got.axes.map(others)).toEqual(whole.axes);
    if (keepsPlace) expect(got.axes.some((axis) => Number.isNaN(axis[6]))).toBe(true);
  });

  test('an unreadable cell is never zero', () => {
    for (const cell of ['', 'NaN', 'abc', '=0', '-', 'null', 'O', 'l', '0x0', '"0,0"'])
      expect(values(read(withRows(`1,99,${cell},${cell}`))).axes.map((axis) => axis[6])).toEqual([NaN, NaN]);
  });

  test.each(['', '   ', ',,,', '\t', '# 1,99,1,1'])('%j is no row and no problem', (row) => {
    const outcome = read(withRows(row, '# a remark'));
    expect(outcome).toMatchObject({ problemCount: 0, summary: { rows: 12 } });
  });

  test('frames: a part of a frame and one beyond 32 bits are listed', () => {
    const rows = ['1,0,1,1', '1,0.5,1,1', '1,2147483648,1,1', '1,1e9,1,1', '1,-3,1,1', '1,2.0,1,1'];
    const outcome = read(`track,frame,x,y\n${rows.join('\n')}\n`, { frameInterval: '1' });
    expect(outcome.problems).toEqual([
      { line: 3, reason: 'frame "0.5" is not a whole number', text: rows[1] },
      { line: 4, reason: 'frame "2147483648" is too large', text: rows[2] },
    ]);
    expect(values(outcome).frame).toEqual([0, 1e9, -3, 2]);
  });

  test('cut at blanks a row with a cell less has its cells in the wrong places, so it is left out', () => {
    const outcome = read('track t x y\n1 0 1 2\n1 1 5\n1 2 3 4\n');
    expect(outcome.problems).toEqual([{ line: 3, reason: '3 cells instead of 4', text: '1 1 5' }]);
  });

  test('lines are those of an editor, whatever ends them and whatever goes before', () => {
    const lines = [
      '',
      '# remark',
      HEAD,
      '# "',
      GOOD[0]!,
      '',
      GOOD[1]!,
      '1,9,bad,1',
      '"1",10,"wo\nrse",2',
      GOOD[2]!,
      '1,,1,1',
    ];
    for (const lineEnd of ['\n', '\r\n', '\r'])
      expect(
        read(lines.join(lineEnd).replaceAll('wo\n', `wo${lineEnd}`)).problems.map(({ line }) => line),
      ).toEqual([8, 9, 12]);
  });

  test('of very many the first thousand are kept, all are counted, and long lines are cut', () => {
    const bad = Array.from({ length: 3000 }, (_, i) => `1,${i},x${'y'.repeat(500)},1`);
    const good = Array.from({ length: 600 }, (_, i) => `2,${i},${i % 7},${i % 5}`);
    const outcome = read(`${HEAD}\n${[...good, ...bad].join('\n')}\n`);
    expect(outcome.problemCount).toBe(3000);
    expect(outcome.problems).toHaveLength(MAX_PROBLEMS_KEPT);
    expect(outcome.problems[0]!.text).toHaveLength(MAX_PROBLEM_TEXT);
    expect(outcome.problems[0]!.reason.length).toBeLessThan(80);
    expect(outcome.summary.badRows).toBe(3000);
  });

  test('rows in any order and of any track are all kept, in the order of the file', () => {
    const outcome = read('t,x,track\n3,1,b\n1,2,a\n2,3,b\n1,4,b\n');
    expect(values(outcome)).toEqual({
      tracks: ['b', 'a', 'b', 'b'],
      time: [3, 1, 2, 1],
      frame: null,
      axes: [[1, 2, 3, 4]],
    });
    expect(outcome.trajectories.trackIds).toEqual(['b', 'a']);
  });

  test('ids are texts: 1, 01 and 1.0 are three tracks, and blanks around one are none of it', () => {
    const outcome = read('track,t,x\n1,0,1\n01,0,2\n1.0,0,3\n 1 ,1,4\n');
    expect(outcome.trajectories.trackIds).toEqual(['1', '01', '1.0']);
    expect(outcome.summary).toMatchObject({ tracks: 3, longestTrackFrames: 2, shortestTrackFrames: 1 });
  });
});

/** ECMA-262, 7.1.4.1: the value of a numeric literal, correctly rounded. */
const literal = fc.oneof(
  fc.double({ noNaN: true, noDefaultInfinity: true }).map((x) => (Object.is(x, -0) ? '-0' : String(x))),
  fc.tuple(fc.bigInt({ min: -(10n ** 20n), max: 10n ** 20n }), fc.nat(18)).map(([m, e]) => `${m}e-${e}`),
  fc.double({ min: -1e6, max: 1e6, noNaN: true }).map((x) => x.toFixed(6)),
);
const cells = fc.array(fc.tuple(literal, literal), { minLength: 2, maxLength: 40 });

describe('values', () => {
  test('have the bits of Number(text) whichever way the table is written', () => {
    fc.assert(
      fc.property(
        cells,
        fc.constantFrom(
          [',', '.'],
          [';', '.'],
          [';', ','],
          ['\t', '.'],
          ['\t', ','],
          [' ', '.'],
          [' ', ','],
          ['|', ','],
        ),
        fc.constantFrom('\n', '\r\n'),
        fc.constantFrom('utf-8', 'bom', 'utf-16le', 'utf-16be'),
        (rows, [delimiter, decimal], lineEnd, encoding) => {
          const write = (cell: string | number) => String(cell).replace('.', decimal!);
          const table = rows.map(([x, y], i) => [1, i, x, y].map(write).join(delimiter));
          const text = [['track', 't', 'x', 'y'].join(delimiter), ...table].join(lineEnd);
          const bytes = encoding.startsWith('utf-16')
            ? utf16(text, encoding === 'utf-16le' ? 'le' : 'be')
            : bytesOf(encoding === 'bom' ? `\ufeff${text}` : text);
          const outcome = read(bytes);
          expect(outcome.problemCount).toBe(0);
          rows.forEach(([x, y], i) => {
            const [readX, readY] = outcome.trajectories.axes;
            expect(Object.is(readX![i], Number(x))).toBe(true);
            expect(Object.is(readY![i], Number(y))).toBe(true);
          });
        },
      ),
      { numRuns: 300 },
    );
  });

  test('are rounded once where a unit is converted: those of the exact quotient', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: -(10 ** 9), max: 10 ** 9 }), { minLength: 2, maxLength: 20 }),
        (list) => {
          const text = `t (ms),x (nm)\n${list.map((x, i) => `${i},${x}`).join('\n')}\n`;
          const { axes, time } = values(read(text));
          list.forEach((x, i) => {
            // The shortest way to write a thousandth of a whole number is exact in decimal, and Number() rounds it once.
            expect(axes[0]![i]).toBe(Number(`${x}e-3`) + 0);
            expect(time![i]).toBe(Number(`${i}e-3`));
          });
        },
      ),
    );
  });
});

describe('the same bytes and the same reading are the same thing', () => {
  const text = `${HEAD}\n${GOOD.join('\n')}\n1,99,bad,1\n`;
  const digest = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');

  test('values, problems, previews and address, each time', () => {
    const first = readTrajectories(bytesOf(text), inspect(text).spec);
    expect(readTrajectories(bytesOf(text), inspect(text).spec)).toEqual(first);
    // From another place in memory, and after the spec went through a browser.
    const padded = new Uint8Array(bytesOf(text).length + 7);
    padded.set(bytesOf(text), 7);
    const travelled = JSON.parse(JSON.stringify(inspect(text).spec)) as ReturnType<typeof inspect>['spec'];
    expect(readTrajectories(padded.subarray(7), travelled)).toEqual(first);
    expect(readingHash(digest(bytesOf(text)), travelled)).toBe(
      readingHash(digest(bytesOf(text)), inspect(text).spec),
    );
  });

  test('the bytes are not changed by being read', () => {
    const bytes = bytesOf(text);
    const before = digest(bytes);
    readTrajectories(bytes, inspect(bytes).spec);
    expect(digest(bytes)).toBe(before);
  });

  test('each setting of a reading is part of its address', () => {
    const { spec } = inspect(text);
    const others = [
      { ...spec, parser: 'x' },
      { ...spec, dialect: { ...spec.dialect, firstDataLine: 3 } },
      { ...spec, columns: { ...spec.columns, y: null } },
      { ...spec, units: { ...spec.units, x: 'nm' as const } },
      { ...spec, frameInterval: '1' },
      { ...spec, frameInterval: '1.0' },
      { ...spec, pixelSize: '1' },
      { ...spec, exposure: { seconds: '1' } },
      { ...spec, exposure: { fraction: '1' } },
    ];
    const addresses = [spec, ...others].map((one) => readingHash('0'.repeat(64), one));
    expect(new Set(addresses).size).toBe(addresses.length);
  });
});

test('the summary counts gaps, frames, lengths and the box', () => {
  const rows = ['1,0,0,5', '1,1,2,4', '1,4,-1,9', '1,4,7,7', '2,1,3,3', '3,9,bad,1'];
  const { summary, paths } = read(`track,frame,x,y\n${rows.join('\n')}\n`, { frameInterval: '0.5' });
  expect(summary).toEqual({
    rows: 6,
    tracks: 2,
    frames: 3,
    longestTrackFrames: 3,
    shortestTrackFrames: 1,
    gaps: 1,
    missingFrames: 2,
    frameInterval: 0.5,
    dims: 2,
    badRows: 1,
    bounds: [
      [-1, 7],
      [1, 9],
    ],
  });
  expect(paths).toMatchObject({ shown: 2, of: 2 });
  expect(paths.tracks[0]).toEqual({ id: '1', x: [0, 2, -1, 7], y: [5, 4, 9, 7] });
});

test('the preview shows at most 60 tracks of 400 points, with the first and the last of each', () => {
  const rows = Array.from({ length: 130 }, (_, track) =>
    Array.from({ length: track === 0 ? 2001 : 3 }, (_, i) => `${track},${i},${i},${track}`).join('\n'),
  );
  const { paths } = read(`track,t,x,y\n${rows.join('\n')}\n`);
  expect(paths.of).toBe(130);
  expect(paths.shown).toBe(paths.tracks.length);
  expect(paths.shown).toBeLessThanOrEqual(60);
  expect(paths.shown).toBeGreaterThan(40);
  const long = paths.tracks[0]!;
  expect(long.x.length).toBeLessThanOrEqual(400);
  expect([long.x[0], long.x.at(-1)]).toEqual([0, 2000]);
});
