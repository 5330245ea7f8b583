import { describe, expect, test } from 'vitest';
import { eachRow, withPlainBreaks, type Row } from '../../../analysis/intake/rows';

/** Cells of all rows with their lines, and the faults, as one list. */
function cut(text: string, delimiter: ',' | ';' | '\t' | '|' | ' ' = ',', comment: string | null = null) {
  const plain = withPlainBreaks(text);
  if (typeof plain !== 'string') throw new Error(plain.message);
  const rows: [number, ...string[]][] = [];
  const faults: [number, string][] = [];
  const failure = eachRow(
    plain,
    { delimiter, comment },
    {
      row: ({ line, cells }: Row) => void rows.push([line, ...cells]),
      fault: (line, reason) => void faults.push([line, reason]),
    },
  );
  return { rows, faults, failure };
}

/** The rules of RFC 4180, section 2, with its own examples. */
describe('RFC 4180', () => {
  const twoRows = [
    [1, 'aaa', 'bbb', 'ccc'],
    [2, 'zzz', 'yyy', 'xxx'],
  ];
  test.each([
    ['2.1 records on lines of their own', 'aaa,bbb,ccc\r\nzzz,yyy,xxx\r\n', twoRows],
    ['2.2 the last break may be missing', 'aaa,bbb,ccc\r\nzzz,yyy,xxx', twoRows],
    ['2.5 cells in quotation marks', '"aaa","bbb","ccc"\r\nzzz,yyy,xxx', twoRows],
    [
      '2.6 a break inside quotation marks',
      '"aaa","b\r\nbb","ccc"\r\nzzz,yyy,xxx',
      [
        [1, 'aaa', 'b\nbb', 'ccc'],
        [3, 'zzz', 'yyy', 'xxx'],
      ],
    ],
    ['2.6 a comma inside quotation marks', '"a,aa",bbb', [[1, 'a,aa', 'bbb']]],
    ['2.7 a quotation mark is doubled', '"aaa","b""bb","ccc"', [[1, 'aaa', 'b"bb', 'ccc']]],
    ['an empty quoted cell', '"",x', [[1, '', 'x']]],
  ])('%s', (_, text, rows) => expect(cut(text)).toEqual({ rows, faults: [], failure: null }));
});

describe('lines', () => {
  const rows = [
    [1, 'a', 'b'],
    [3, '1', '2'],
    [4, '3', '4'],
  ];
  test.each([
    ['\\n', 'a,b\n\n1,2\n3,4'],
    ['\\r\\n', 'a,b\r\n\r\n1,2\r\n3,4\r\n'],
    ['lone \\r', 'a,b\r\r1,2\r3,4\r'],
    ['all kinds in one file', 'a,b\r\n\r1,2\n3,4\n\n'],
  ])('are counted as an editor counts them: %s', (_, text) => expect(cut(text).rows).toEqual(rows));

  test('after quoted cells that go over several lines, with all kinds of breaks', () => {
    expect(cut('"a\r\nb\rc",1\r\n"d\n\n",2\n3,4').rows).toEqual([
      [1, 'a\nb\nc', '1'],
      [4, 'd', '2'],
      [7, '3', '4'],
    ]);
  });

  test('comments are left out wherever they stand, with all that is in them, and no line moves', () => {
    expect(cut('# say "hello\n1,2\n  # 3,4\n5,"6"\n', ',', '#')).toEqual({
      rows: [
        [2, '1', '2'],
        [4, '5', '6'],
      ],
      faults: [],
      failure: null,
    });
  });

  test('any run of blanks and tabs parts cells when the delimiter is a blank', () => {
    expect(cut('  1   2\t3 \n\t4 "5 6"  7\n', ' ').rows).toEqual([
      [1, '1', '2', '3'],
      [2, '4', '5 6', '7'],
    ]);
  });
});

describe('a stray quotation mark costs its own line only', () => {
  test('one that is never closed', () => {
    const { rows, faults } = cut('a,b\n1,"2\n3,4\n5,6\n');
    expect(rows.map(([line]) => line)).toEqual([1, 3, 4]);
    expect(faults).toEqual([[2, 'a quotation mark is opened and not closed']]);
  });

  test('one with text behind it', () => {
    const { rows, faults } = cut('1,2\n"3"4,5\n6,7\n"8",9\n');
    expect(rows).toEqual([
      [1, '1', '2'],
      [3, '6', '7'],
      [4, '8', '9'],
    ]);
    expect(faults).toEqual([[2, 'text stands after the closing quotation mark of a cell']]);
  });

  test('a record of several lines is one: the later lines are listed too', () => {
    const { rows, faults } = cut('1,2\n"3\n4","5"x\n6,7\n');
    expect(rows).toEqual([
      [1, '1', '2'],
      [4, '6', '7'],
    ]);
    expect(faults.map(([line]) => line)).toEqual([2, 3]);
    expect(faults[1]![1]).toBe('belongs to the cell that begins in line 2');
  });

  test('a mark inside a cell is an ordinary character', () => {
    expect(cut('5" lens,1\n6,2\n').rows).toEqual([
      [1, '5" lens', '1'],
      [2, '6', '2'],
    ]);
  });

  test('many of them do not make it slow, and all are listed', () => {
    const lines = 200_000;
    const { rows, faults } = cut('"x\n'.repeat(lines));
    expect(rows.length + faults.length).toBe(lines);
    const far = cut(`"${'x\n'.repeat(60_000)}${'"x\n'.repeat(1000)}`);
    expect(far.rows.length + far.faults.length).toBe(61_000);
  });
});

describe('limits', () => {
  test('a line of more than 1 MiB', () => {
    expect(withPlainBreaks(`a\n${'1,'.repeat(524_289)}`)).toMatchObject({ code: 'line-too-long', line: 2 });
    expect(typeof withPlainBreaks(`a\n${'1,'.repeat(524_288)}`)).toBe('string');
  });

  test('a cell of more than 64 KiB', () => {
    expect(cut(`1,2\n3,${'4'.repeat(65_537)}\n`).failure).toMatchObject({ code: 'line-too-long', line: 2 });
    expect(cut(`1,2\n3,${'4'.repeat(65_536)}\n`).failure).toBeNull();
  });

  test('more than 1,000 columns', () => {
    expect(cut(`1,2\n\n${'1,'.repeat(1000)}1`).failure).toMatchObject({ code: 'too-wide', line: 3 });
    expect(cut('1,'.repeat(999) + '1').failure).toBeNull();
  });

  test('reading stops where it is told to', () => {
    let seen = 0;
    eachRow('1,2\n3,4\n5,6\n', { delimiter: ',', comment: null }, { row: () => (seen += 1) < 2 });
    expect(seen).toBe(2);
  });
});
