import Papa from 'papaparse';
import { expect, test } from 'vitest';
import { toSafeCsv } from '../../../db/files/csv';

/** What a spreadsheet would take for a formula: OWASP, "CSV Injection" (from memory); full-width forms with it (rule U7). */
test.each([
  '=1+1',
  '+1',
  '-1',
  '@SUM(A1)',
  '\t=1',
  '\r=1',
  '\0=1',
  '  =1',
  '＝1',
  '＋1',
  '－1',
  '＠x',
  '\n=1',
])('the text %j is made harmless, and can be read back whole', (text) => {
  const csv = toSafeCsv(['text'], [[text]]);
  const { data } = Papa.parse<string[]>(csv, { skipEmptyLines: false });
  expect(data[1]?.[0]).toBe(`'${text}`);
});

test('numbers stay numbers, also below zero', () => {
  expect(toSafeCsv(['d'], [[-0.43], [1e-7], [12]])).toBe('d\r\n-0.43\r\n1e-7\r\n12\r\n');
});

test('quotes, separators and line ends stay within their cell (RFC 4180)', () => {
  const cells = ['a "word"', 'one, two', 'first\r\nsecond', 'plain', ''];
  const csv = toSafeCsv(['1', '2', '3', '4', '5'], [cells]);
  expect(csv.split('\r\n')[1]).toContain('"a ""word"""');
  expect(Papa.parse<string[]>(csv).data[1]).toEqual(cells);
  expect(csv.endsWith('\r\n')).toBe(true);
});

test('the names of columns are text like any other', () => {
  expect(toSafeCsv(['line', '=cmd'], [[1, 'x']])).toBe("line,'=cmd\r\n1,x\r\n");
});
