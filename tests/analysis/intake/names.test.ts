import { describe, expect, test } from 'vitest';
import { inspect, read, values } from './files';

/** Where the names and units of a table stand, and over which columns. Ways of writing: common practice, no source. */
const BODY = ['1,0,1.5,2', '1,1,2.5,3.25', '1,2,2.25,5', '1,3,3.5,4.75'];
const XY = [
  [1.5, 2.5, 2.25, 3.5],
  [2, 3.25, 5, 4.75],
];

describe('names over the right columns', () => {
  test.each([
    ['a delimiter at the end of each row of data', 'track,t,x,y', BODY.map((row) => `${row},`)],
    ['two of them', 'track,t,x,y', BODY.map((row) => `${row},,`)],
    ['a delimiter at the end of the names only', 'track,t,x,y,', BODY],
    ['one at the end of both', 'track,t,x,y,', BODY.map((row) => `${row},`)],
    ['blanks around the cells', ' track , t , x , y ', BODY.map((row) => row.replaceAll(',', ' ,  '))],
    ['names in quotation marks', '"track","t","x","y"', BODY],
    ['a name over two lines', '"track","t","x","y\n(µm)"', BODY],
  ])('%s', (_, names, rows) => {
    const outcome = read(`${names}\n${rows.join('\n')}\n`);
    expect(values(outcome)).toMatchObject({ time: [0, 1, 2, 3], axes: XY });
    expect(outcome.problemCount).toBe(0);
  });

  test.each([
    [
      'one name fewer than columns: the first column numbers the rows',
      '"track" "t" "x" "y"\n',
      (row: string, i: number) => `"${i + 1}" ${row.replaceAll(',', ' ')}`,
    ],
    ['an empty first name', ',track,t,x,y\n', (row: string, i: number) => `${i},${row}`],
  ])('%s', (_, names, write) => {
    // The first is what R's write.table makes, and what its read.table takes for row names (R help: read.table, row.names).
    const text = `${names}${BODY.map(write).join('\n')}\n`;
    const { spec, notes } = inspect(text);
    expect(spec.columns).toEqual({ track: 1, time: 2, frame: null, x: 3, y: 4, z: null });
    expect(notes.join(' ')).toContain('first column has no name');
    expect(values(read(text))).toMatchObject({ time: [0, 1, 2, 3], axes: XY });
  });

  test('two names too few are no names', () => {
    const { columns, notes } = inspect(`x,y\n${BODY.join('\n')}\n`);
    expect(columns[0]!.name).toBe('column 1');
    expect(notes.join(' ')).toContain('no column names');
  });

  test.each([
    ['#', '# track,t,x,y'],
    ['#', '## track, t, x, y'],
    ['#', '# track t x y'],
    ['%', '% track,t,x,y'],
    ['//', '// track,t,x,y'],
  ])('in a comment that begins with %s: %s', (comment, line) => {
    const { spec, columns } = inspect(`${line}\n${BODY.join('\n')}\n`);
    expect(spec.dialect).toMatchObject({ comment, headerLine: 1, firstDataLine: 2 });
    expect(columns.map(({ name }) => name)).toEqual(['track', 't', 'x', 'y']);
    expect(values(read(`${line}\n${BODY.join('\n')}\n`)).axes).toEqual(XY);
  });

  test('a comment that is a sentence holds no names', () => {
    const { spec } = inspect(`# track 7, taken at noon, x is the long side\n${BODY.join('\n')}\n`);
    expect(spec.dialect).toMatchObject({ headerLine: null, firstDataLine: 2 });
  });

  test('lines about the measurement above the names, with a mark of the delimiter before them', () => {
    const text = `sep=;\nExperiment 12\nOil;;\n\ntrack;t;x;y\n${BODY.join('\n').replaceAll(',', ';')}\n`;
    expect(inspect(text).spec.dialect).toMatchObject({ delimiter: ';', headerLine: 5, firstDataLine: 6 });
    expect(values(read(text)).axes).toEqual(XY);
  });
});

describe('units', () => {
  test.each([
    ['a row of their own', 'track,t,x,y\n,s,nm,nm'],
    ['the same in brackets', 'track,t,x,y\n-,[s],(nm),{nm}'],
    ['with a dash where there is none', 'track,t,x,y\n–,s,nm,nm'],
    ['in the names, in brackets', 'track,t (s),x (nm),y [nm]'],
    ['after a stroke', 'track,t/s,x/nm,y/nm'],
    ['after an underscore', 'track,t_s,x_nm,y_nm'],
    ['after a blank', 'track,t s,x nm,y nm'],
    ['after "in"', 'track,t in s,x in nm,y in nm'],
    ['written out', 'track,t (seconds),x (nanometres),y (nanometers)'],
    ['one row of units under names that have them too', 'track,t (ms),x (µm),y (µm)\n,s,nm,nm'],
  ])('%s', (_, head) => {
    const text = `${head}\n${BODY.join('\n')}\n`;
    expect(inspect(text).spec.units).toEqual({ time: 's', x: 'nm', y: 'nm', z: null });
    expect(values(read(text)).axes).toEqual(XY.map((axis) => axis.map((value) => value / 1000)));
  });

  test.each([
    ['ms', 1e3],
    ['µs', 1e6],
    ['min', 1 / 60],
    ['h', 1 / 3600],
  ])('times in %s', (unit, perSecond) => {
    const { time } = values(read(`track,t (${unit}),x (µm),y (µm)\n${BODY.join('\n')}\n`));
    time!.forEach((seconds, i) => expect(seconds * perSecond).toBeCloseTo(i, 12));
  });

  test.each([
    ['nm', 1e-3],
    ['mm', 1e3],
    ['m', 1e6],
  ])('positions in %s', (unit, micrometres) => {
    const { axes } = values(read(`track,t (s),x (${unit}),y (${unit})\n${BODY.join('\n')}\n`));
    axes[0]!.forEach((value, i) => expect(value / micrometres).toBeCloseTo(XY[0]![i]!, 12));
  });

  test('each axis its own', () => {
    const text = `track,t (s),x (µm),y (nm)\n${BODY.join('\n')}\n`;
    expect(inspect(text).spec.units).toMatchObject({ x: 'um', y: 'nm' });
    expect(values(read(text)).axes).toEqual([XY[0], XY[1]!.map((value) => value / 1000)]);
  });

  test('an axis without a unit has that of the other, and this is said', () => {
    const { spec, notes, assumed } = inspect(`track,t (s),x,y (nm)\n${BODY.join('\n')}\n`);
    expect(spec.units).toMatchObject({ x: 'nm', y: 'nm' });
    expect(notes.join(' ')).toContain('One axis has no unit');
    expect(assumed).toEqual(['exposure']);
  });

  test.each([
    ['x (cm)', 'lengthUnit', 'cm'],
    ['x (Å)', 'lengthUnit', 'Å'],
    ['x/in', 'lengthUnit', 'in'],
    ['t (days)', 'timeUnit', 'days'],
    ['t (ns)', 'timeUnit', 'ns'],
  ])('%s cannot be converted, so it is asked for and nothing is assumed', (name, what, unit) => {
    const names = name.startsWith('x') ? `track,t (s),${name},y (µm)` : `track,${name},x (µm),y (µm)`;
    const { required, assumed, notes } = inspect(`${names}\n${BODY.join('\n')}\n`);
    expect(required).toEqual([what]);
    expect(assumed).toEqual(['exposure']);
    expect(notes.join(' ')).toContain(`The unit "${unit}"`);
    expect(notes.join(' ')).not.toMatch(/taken as/);
  });

  test('a text in brackets that is no unit is told, and µm assumed', () => {
    const { notes, assumed, required } = inspect(`track,t (s),x (left),y (left)\n${BODY.join('\n')}\n`);
    expect(notes.join(' ')).toContain('"left" of column "x" was not understood as a unit');
    expect(assumed).toEqual(['exposure', 'lengthUnit']);
    expect(required).toEqual([]);
  });
});
