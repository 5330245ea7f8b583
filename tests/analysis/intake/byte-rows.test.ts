import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Dialect, ReadingSpec } from '../../../analysis/intake/types';
import { readTrajectories } from '../../../analysis/intake/read-trajectories';
import { PARSER_VERSION } from '../../../analysis/intake/limits';
import { bytesOf, read, values } from './files';

/**
 * Rows of plain numbers are read straight from their bytes. A quotation mark anywhere among the data sends a file the other
 * way, through a text and papaparse; so a remark with one in it makes the same file go both ways, and both must agree.
 */
const specOf = (more: Partial<Dialect> = {}): ReadingSpec => ({
  parser: PARSER_VERSION,
  dialect: {
    encoding: 'utf-8',
    delimiter: ',',
    decimal: '.',
    comment: '#',
    headerLine: 1,
    unitsLine: null,
    firstDataLine: 2,
    ...more,
  },
  columns: { track: 0, time: 1, frame: null, x: 2, y: 3, z: null },
  units: { time: 's', x: 'um', y: 'um', z: null },
  frameInterval: null,
  pixelSize: null,
  exposure: null,
});

function bothWays(lines: readonly string[], spec: ReadingSpec, lineEnd: string) {
  const text = lines.join(lineEnd) + lineEnd;
  const remark = `# a "remark"${lineEnd}`;
  return [readTrajectories(bytesOf(text), spec), readTrajectories(bytesOf(text + remark), spec)] as const;
}

const number = fc.oneof(
  fc.double({ noNaN: true, noDefaultInfinity: true }).map(String),
  fc.double({ min: -1e4, max: 1e4, noNaN: true }).map((x) => x.toFixed(5)),
  fc.integer().map(String),
  fc.constantFrom(
    '0',
    '-0',
    '+1.50',
    '.5',
    '5.',
    '007',
    '1e3',
    '-2E-7',
    '123456789012345678',
    '0.1234567890123456789',
  ),
  fc.constantFrom(
    '',
    'NaN',
    'inf',
    '1e400',
    '0x10',
    '1 000',
    'abc',
    '−1',
    '1,5',
    '1.2.3',
    '-',
    '+',
    '.',
    'é',
  ),
);
const id = fc.oneof(
  fc.integer({ min: 0, max: 30 }).map(String),
  fc.constantFrom('007', 'bead 3', 'ä', '', ' 7 '),
);
const row = fc.tuple(id, number, number, number).map((cells) => cells.join(','));
const other = fc.constantFrom(
  '',
  '   ',
  '# remark',
  '  # remark',
  'track,t,x,y',
  '1,2,3',
  '1,2,3,4,5',
  '1,2,3,4,,',
  ',,,',
  'end of data',
);

describe('rows from bytes', () => {
  test('are those that a text gives, in every row, problem and count', () => {
    fc.assert(
      fc.property(
        fc.array(fc.oneof({ weight: 6, arbitrary: row }, { weight: 1, arbitrary: other }), { maxLength: 40 }),
        fc.constantFrom('\n', '\r\n', '\r'),
        (rows, lineEnd) => {
          const [fromBytes, fromText] = bothWays(['track,t,x,y', ...rows], specOf(), lineEnd);
          expect(fromBytes).toEqual(fromText);
        },
      ),
      { numRuns: 600 },
    );
  });

  test('with semicolons and decimal commas, tabs, and blanks', () => {
    const plain = fc.tuple(
      fc.integer({ min: 1, max: 9 }),
      fc.nat(99),
      fc.double({ min: -9, max: 9, noNaN: true }),
      fc.nat(9),
    );
    fc.assert(
      fc.property(
        fc.array(plain, { minLength: 1, maxLength: 20 }),
        fc.constantFrom(';', '\t', ' ', '|'),
        (rows, delimiter) => {
          const decimal = delimiter === ';' ? ',' : '.';
          const lines = rows.map((cells) =>
            cells.join(delimiter === ' ' ? '   ' : ` ${delimiter}`).replaceAll('.', decimal),
          );
          const spec = specOf({ delimiter: delimiter as Dialect['delimiter'], decimal });
          const [fromBytes, fromText] = bothWays(['track', ...lines.map((line) => ` ${line} `)], spec, '\n');
          expect(fromBytes).toEqual(fromText);
          if (!fromBytes.failed) expect(fromBytes.problemCount).toBe(0);
        },
      ),
      { numRuns: 300 },
    );
  });

  test('every number is bit for bit Number(text)', () => {
    fc.assert(
      fc.property(
        fc.array(
          fc.oneof(
            fc.tuple(fc.bigInt({ min: 0n, max: 10n ** 22n }), fc.nat(24)).map(([digits, point]) => {
              const text = digits.toString().padStart(point + 1, '0');
              return point === 0 ? text : `${text.slice(0, -point)}.${text.slice(-point)}`;
            }),
            fc.double({ noNaN: true, noDefaultInfinity: true }).map(String),
          ),
          { minLength: 1, maxLength: 50 },
        ),
        (texts) => {
          const file = `track,t,x,y\n${texts.map((text, i) => `1,${i},${text},-${text.replace(/^-/, '')}`).join('\n')}\n`;
          const outcome = readTrajectories(bytesOf(file), specOf());
          if (outcome.failed) throw new Error(outcome.message);
          texts.forEach((text, i) => {
            expect(Object.is(outcome.trajectories.axes[0]![i], Number(text))).toBe(true);
            expect(Object.is(outcome.trajectories.axes[1]![i], Number(`-${text.replace(/^-/, '')}`))).toBe(
              true,
            );
          });
        },
      ),
      { numRuns: 500 },
    );
  });

  test('quoted names above the data do not stop it, and a byte-order mark is no part of the first id', () => {
    const file = '\ufeff"track","t (s)","x (µm)","y (µm)"\n7,0,1,2\n7,1,2,3\n';
    expect(values(read(file))).toEqual({
      tracks: ['7', '7'],
      time: [0, 1],
      frame: null,
      axes: [
        [1, 2],
        [2, 3],
      ],
    });
    const bare = '\ufeff7,0,1,2\n7,1,2,3\n';
    expect(readTrajectories(bytesOf(bare), specOf({ headerLine: null, firstDataLine: 1 }))).toMatchObject({
      trajectories: { trackIds: ['7'] },
    });
  });

  test('a byte that is no UTF-8 is named with its line', () => {
    const bytes = bytesOf('track,t,x,y\n1,0,1,2\n1,1,?,3\n');
    bytes[bytes.indexOf(63)] = 0xe4;
    expect(readTrajectories(bytes, specOf())).toMatchObject({ failed: true, code: 'encoding', line: 3 });
    expect(readTrajectories(bytes, specOf({ encoding: 'windows-1252' }))).toMatchObject({
      problems: [{ line: 3, reason: 'x "ä" is not a number' }],
    });
  });

  test('a file without a line end, or with nothing below its names, is no trouble', () => {
    expect(readTrajectories(bytesOf('track,t,x,y\n1,0,1,2\n1,1,2,3'), specOf())).toMatchObject({
      summary: { rows: 2 },
    });
    expect(readTrajectories(bytesOf('track,t,x,y'), specOf())).toMatchObject({
      failed: true,
      code: 'no-rows',
    });
  });

  test('a file in which no position is whole is none, however many rows it has', () => {
    for (const rows of ['1,0,a,b\n1,1,a,b', '1,0,a,2\n1,1,3,b', '1,0,"a",2\n1,1,3,']) {
      expect(readTrajectories(bytesOf(`track,t,x,y\n${rows}\n`), specOf())).toMatchObject({
        failed: true,
        code: 'no-rows',
        line: 2,
      });
    }
    expect(readTrajectories(bytesOf('track,t,x,y\n1,0,a,2\n1,1,3,4\n'), specOf())).toMatchObject({
      summary: { rows: 2, tracks: 1, badRows: 1 },
    });
  });
});
