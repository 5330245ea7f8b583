import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { inspectFile } from '../../../analysis/intake/inspect-file';
import { MAX_COLUMNS, MAX_FIELD_CHARACTERS, MAX_LINE_CHARACTERS } from '../../../analysis/intake/limits';
import { takeIn } from '../../../analysis/intake/take-in';
import { bytesOf, inspect, read, refusal, tryRead, utf16, values } from './files';

/** Files that are no trajectories, that are made to do harm, or that are only unlucky. Each gets an answer, never a throw. */
const HEAD = 'track,t,x,y';
const ROWS = ['1,0,1,2', '1,1,2,3', '1,2,3,5', '1,3,4,4'];
const TABLE = `${HEAD}\n${ROWS.join('\n')}\n`;
const repeat = (text: string, bytes: number) => text.repeat(Math.ceil(bytes / text.length)).slice(0, bytes);

describe('a file that is no trajectory says what it seems to be and what to do', () => {
  test.each([
    ['nothing', '', 'empty', /^The file is empty\. Export the tracks again\.$/],
    ['blanks', ' \n\t\n \r\n', 'no-columns', /an empty page: there are only blanks and line breaks/],
    ['a byte-order mark alone', '\ufeff', 'no-columns', /an empty page/],
    ['names without rows', 'track,t,x,y\n', 'no-columns', /a line of names without rows of numbers below it/],
    [
      'names without rows, after a remark',
      '# day 2\n\ntrack;t;x;y',
      'no-columns',
      /a line of names without rows/,
    ],
    ['one column with its name', 'x\n1\n2.5\n3\n', 'no-columns', /a single column of numbers/],
    ['one column', '1\n2.5\n3\n', 'no-columns', /a single column of numbers/],
    [
      'prose',
      'Dear all,\nwe saw 3 beads, and 2 of them stuck.\nYours\n',
      'no-columns',
      /text without a table of numbers/,
    ],
    ['a web page', '\n <!doctype html><title>1,2</title>', 'no-columns', /a web page or an XML file/],
    ['XML', '<?xml version="1.0"?><r x="1"/>', 'no-columns', /a web page or an XML file/],
    ['JSON', '{"x":[1,2,3],"y":[1,2,3]}\n', 'no-columns', /a JSON file/],
    ['a list in JSON', '[[1,2],[3,4]]', 'no-columns', /a JSON file/],
    ['remarks only', '# 1,2,3\n# 4,5,6\n', 'no-columns', /text without a table/],
    ['lines without a delimiter', 'alpha\nbeta\ngamma\n', 'no-columns', /text without a table/],
  ])('%s', (_, text, code, reason) => {
    const failure = refusal(text);
    expect(failure.code).toBe(code);
    expect(failure.message).toMatch(reason);
    expect(failure.message).toMatch(/Export the tracks|Name them/);
    expect(failure.message.length).toBeLessThan(400);
  });

  test('a table that is cut wrongly by a person is refused with the first reason', () => {
    const failure = tryRead(TABLE, {}, (spec) => ({ ...spec, dialect: { ...spec.dialect, delimiter: ';' } }));
    expect(failure).toMatchObject({ failed: true, code: 'bad-spec', line: 2 });
    expect(failure.failed && failure.message).toMatch(/Column \d .* the file has 1 columns/);
  });

  test('a name with another ending is told of, and one with a right ending is not believed', () => {
    expect(inspect(TABLE, 'tracks.png').notes.join(' ')).toContain('ends in ".png"');
    expect(inspect(TABLE, 'TRACKS.CSV').notes.join(' ')).not.toContain('ends in');
    expect(inspect(TABLE, 'no-ending').notes.join(' ')).not.toContain('ends in');
    expect(inspectFile(bytesOf('%PDF-1.4\n1,2,3\n'), 'tracks.csv')).toMatchObject({
      failed: true,
      code: 'binary',
    });
  });
});

describe('limits (a line of 1 MiB, a cell of 64 KiB, 1,000 columns)', () => {
  test('a line beyond the limit is named, in the head, among the data and by the reader alone', () => {
    expect(MAX_LINE_CHARACTERS).toBe(2 ** 20);
    const long = repeat('1,', MAX_LINE_CHARACTERS + 1);
    expect(refusal(long)).toMatchObject({ code: 'line-too-long', line: 1 });
    expect(refusal(`${TABLE}${long}\n`)).toMatchObject({ code: 'line-too-long', line: 6 });
    const { spec } = inspect(TABLE);
    for (const rest of ['', '# "quoted"\n'])
      expect(tryRead(`${TABLE}${rest}`, {}, () => spec).failed).toBe(false);
    expect(refusal(utf16(`${TABLE}${long}\n`, 'le'))).toMatchObject({ code: 'line-too-long', line: 6 });
  });

  test('a cell beyond the limit is named, whichever way its file is read', () => {
    expect(MAX_FIELD_CHARACTERS).toBe(2 ** 16);
    const row = `1,9,${'7'.repeat(MAX_FIELD_CHARACTERS + 1)},1\n`;
    const far = Array.from({ length: 20_000 }, (_, i) => `1,${i},${i % 7},${i % 5}\n`).join('');
    for (const more of ['', '"1",99999,1,1\n']) {
      const outcome = tryRead(`${HEAD}\n${far}${row}${more}`);
      expect(outcome).toMatchObject({ failed: true, code: 'line-too-long', line: 20_002 });
    }
  });

  test('a row of too many columns is named, and one at the limit is only a bad row', () => {
    expect(MAX_COLUMNS).toBe(1000);
    const far = Array.from({ length: 20_000 }, (_, i) => `1,${i},${i % 7},${i % 5}\n`).join('');
    const row = (columns: number) => `${'1,'.repeat(columns - 1)}1\n`;
    expect(tryRead(`${HEAD}\n${far}${row(1001)}`)).toMatchObject({
      failed: true,
      code: 'too-wide',
      line: 20_002,
    });
    expect(read(`${HEAD}\n${far}${row(1000)}`).problems).toMatchObject([
      { line: 20_002, reason: '1000 cells instead of 4' },
    ]);
    expect(refusal(`${row(1001)}${row(1001)}`)).toMatchObject({ code: 'too-wide', line: 1 });
  });

  test('a table of a thousand columns is read', () => {
    const names = Array.from({ length: 998 }, (_, i) => `q${i}`);
    const row = (i: number) => [...names.map(() => 0), i, i * 2].join(',');
    const wide = `${[...names, 't', 'x'].join(',')}\n${Array.from({ length: 30 }, (_, i) => row(i)).join('\n')}\n`;
    expect(inspect(wide).spec.columns).toMatchObject({ time: 998, x: 999 });
    expect(values(read(wide)).axes[0]![29]).toBe(58);
  });
});

describe('contents that are made to do harm', () => {
  test.each([
    ['a formula', '=1+1'],
    ['a formula with a call', '=HYPERLINK("http://127.0.0.1","x")'],
    ['a command', "@SUM(1+1)*cmd|' /C calc'!A0"],
    ['a script', '<script>alert(1)</script>'],
    ['a path', '../../etc/passwd'],
    ['a format', '%s%n%x'],
    ['text that turns around', '\u202e1.5'],
    ['an ideographic digit', '一'],
    ['a digit of full width', '１'],
    ['a very long number', '9'.repeat(400)],
  ])('%s is a cell that is no number, and stands in the list as it is', (_, cell) => {
    const quoted = `"${cell.replaceAll('"', '""')}"`;
    const outcome = read(`${TABLE}1,4,${quoted},6\n`);
    expect(outcome.problems).toHaveLength(1);
    expect(outcome.problems[0]).toMatchObject({ line: 6 });
    expect(outcome.problems[0]!.reason).toContain(cell.slice(0, 30));
    expect(values(outcome).axes[0]).toEqual([1, 2, 3, 4, NaN]);
  });

  test('negative zero stays negative, and a number below the smallest double is zero with its sign', () => {
    const { axes } = values(read(`${TABLE}1,4,-0,-0.0\n1,5,-1e-400,1e-400\n1,6,5e-324,-5e-324\n`));
    expect(Object.is(axes[0]![4], -0) && Object.is(axes[1]![4], -0)).toBe(true);
    expect(Object.is(axes[0]![5], Number('-1e-400')) && Object.is(axes[1]![5], 0)).toBe(true);
    expect([axes[0]![6], axes[1]![6]]).toEqual([5e-324, -5e-324]);
  });

  test('a zero byte is told with its place, wherever it is', () => {
    const bytes = bytesOf(TABLE);
    for (const at of [0, 7, bytes.length - 1]) {
      const holed = Uint8Array.from(bytes);
      holed[at] = 0;
      expect(refusal(holed)).toMatchObject({ code: 'binary' });
      expect(refusal(holed).message).toContain(`zero byte at position ${at + 1}`);
    }
  });

  test('a mark of quotation that is never closed costs its own line, at each place of a file', () => {
    const lines = [HEAD, ...ROWS];
    for (let at = 1; at < lines.length; at++) {
      const broken = lines.map((line, i) => (i === at ? line.replace(',', ',"') : line)).join('\n');
      const outcome = read(broken);
      expect(outcome.problems.map(({ line }) => line)).toEqual([at + 1]);
      expect(outcome.summary.rows).toBe(ROWS.length - 1);
    }
    // In the names it costs the names; what was guessed instead is said.
    expect(inspect(lines.join('\n').replace('track', '"track')).notes.join(' ')).toContain('no column names');
  });

  test.each([
    [',', '1,0,9', '3 cells instead of 4'],
    [',', '1,0,9,9,9', '5 cells instead of 4'],
    [';', '1;0;9;9;9', '5 cells instead of 4'],
    [' ', '1 0 9', '3 cells instead of 4'],
  ])(
    'rows of another width right below the names cost neither the names nor silence (%j)',
    (mark, row, reason) => {
      const write = (line: string) => line.replaceAll(',', mark);
      const outcome = read([HEAD, row, row, ...ROWS].map(write).join('\n'));
      expect(outcome.problems).toEqual([
        { line: 2, reason, text: row },
        { line: 3, reason, text: row },
      ]);
      expect(values(outcome)).toMatchObject({
        time: [0, 1, 2, 3],
        axes: [
          [1, 2, 3, 4],
          [2, 3, 5, 4],
        ],
      });
    },
  );

  test('rows of every width lose only themselves', () => {
    const ragged = Array.from({ length: 9 }, (_, i) => `1,${10 + i}${',5'.repeat(i)}`);
    const outcome = read(
      `${TABLE}${Array.from({ length: 20 }, (_, i) => `1,${30 + i},1,2`).join('\n')}\n${ragged.join('\n')}\n`,
    );
    expect(outcome.summary.rows - 24).toBe(3);
    expect(outcome.problems.map(({ line }) => line)).toEqual([26, 27, 29, 30, 31, 32, 33, 34]);
  });

  test('names that are words of the language do no harm', () => {
    const names = '__proto__,constructor,t,x,y,toString,hasOwnProperty';
    const rows = Array.from({ length: 6 }, (_, i) => `constructor,${i},${i},${i * 2},${i * 3},1,2`);
    const { columns, spec } = inspect(`${names}\n${rows.join('\n')}\n`);
    expect(columns.map(({ name }) => name)).toEqual(names.split(','));
    expect(spec.columns).toMatchObject({ time: 2, x: 3, y: 4 });
    const units = `track,t (constructor),x (__proto__),y (toString)\n${ROWS.join('\n')}\n`;
    expect(inspect(units).spec.units).toEqual({ time: 's', x: 'um', y: 'um', z: null });
  });
});

/** Known ways to make a scanner of texts slow: what it may go back over, doubled, must not cost four times as much. */
describe('texts that go back on themselves come to an end', () => {
  const size = 400_000;
  test.each([
    ['quotation marks', repeat('"', size)],
    ['quotation marks on lines of their own', repeat('"\n', size)],
    ['marks that open and never close', repeat('"a,', size)],
    ['marks that open cells', repeat(',"', size)],
    ['blanks', `1${repeat(' ', size)}x`],
    ['delimiters', repeat(',', 900)],
    ['line breaks', repeat('\n', size)],
    ['carriage returns', repeat('\r', size)],
    ['comments', repeat('#\n', size)],
    ['signs', repeat('+-', size)],
    ['digits', repeat('1', 60_000)],
    ['digits with points', repeat('1.', size)],
    ['exponents', repeat('1e', size)],
    ['brackets', `track,t (${repeat('(', 60_000)}),x\n1,2,3\n1,3,4\n`],
    ['strokes', `track,t${repeat('/', 60_000)},x\n1,2,3\n1,3,4\n`],
    ['capital letters in a name', `${repeat('aB', 60_000)},t,x\n1,2,3\n1,3,4\n`],
    ['names of rows that differ', Array.from({ length: 40_000 }, (_, i) => `b${i},${i},1,2`).join('\n')],
  ])('%s', (_, text) => {
    const { inspection } = takeIn(bytesOf(text), 'a.csv', {});
    if (inspection.failed) expect(inspection.message.length).toBeGreaterThan(20);
    else expect(inspection.columns.length).toBeGreaterThan(0);
  });
});

describe('whatever the bytes are, there is an answer', () => {
  const answer = (bytes: Uint8Array) => {
    const { inspection, read: outcome } = takeIn(bytes, 'a.csv', { frameInterval: '1', pixelSize: '1' });
    if (inspection.failed) {
      expect(inspection.message).toMatch(/\.$/);
      expect(inspection.line === null || inspection.line >= 1).toBe(true);
      return;
    }
    if (outcome === null) expect(inspection.required.length).toBeGreaterThan(0);
    else if (outcome.failed) expect(outcome.message).toMatch(/\.$/);
    else {
      const { trajectories, summary, problems, problemCount } = outcome;
      expect(problems.length).toBeLessThanOrEqual(problemCount);
      // No infinity and no NaN but where a row is listed; each row has a track.
      for (const axis of trajectories.axes) {
        expect(axis).toHaveLength(summary.rows);
        expect(axis.every((value) => Number.isFinite(value) || Number.isNaN(value))).toBe(true);
      }
      const gaps = trajectories.track.filter((_, row) =>
        trajectories.axes.some((axis) => Number.isNaN(axis[row])),
      );
      expect(gaps.length).toBeLessThanOrEqual(problemCount);
      expect((trajectories.time ?? trajectories.frame)!.every(Number.isFinite)).toBe(true);
      expect(trajectories.track.every((track) => track >= 0 && track < trajectories.trackIds.length)).toBe(
        true,
      );
    }
  };

  test('random bytes', () => {
    fc.assert(fc.property(fc.uint8Array({ maxLength: 400 }), answer), { numRuns: 500 });
  });

  test('random text of the letters of tables', () => {
    const letters = fc.string({
      unit: fc.constantFrom(...'0123456789.,;\t|"\n\r -+eExyt#%µ('),
      maxLength: 300,
    });
    fc.assert(
      fc.property(letters, (text) => answer(bytesOf(text))),
      { numRuns: 1500 },
    );
  });

  test('a good file with a few bytes changed, added or left out', () => {
    const good = bytesOf(TABLE + ROWS.map((row) => row.replace('1', '2')).join('\n'));
    const change = fc.tuple(fc.nat(good.length - 1), fc.nat(255), fc.constantFrom('set', 'put', 'cut'));
    fc.assert(
      fc.property(fc.array(change, { minLength: 1, maxLength: 6 }), (changes) => {
        const bytes = [...good];
        for (const [at, byte, how] of changes)
          bytes.splice(at, how === 'put' ? 0 : 1, ...(how === 'cut' ? [] : [byte]));
        answer(Uint8Array.from(bytes));
      }),
      { numRuns: 1500 },
    );
  });
});
