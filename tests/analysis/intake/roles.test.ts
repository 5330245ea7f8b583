import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { wordsOf } from '../../../analysis/intake/roles-by-name';
import { inspect, read, refusal, values } from './files';

/** Which column is what: first by general English names, then by what stands in it. */

/** A table of so many rows, each column from its own function of the row. */
const table = (names: string | null, columns: readonly ((i: number) => unknown)[], rows = 12) =>
  `${names === null ? '' : `${names}\n`}${Array.from({ length: rows }, (_, i) => columns.map((column) => column(i)).join(',')).join('\n')}\n`;
/** Two particles one after the other, six rows each. */
const id = (i: number) => (i < 6 ? 1 : 2);
const count = (i: number) => i % 6;
/** The second particle comes into view after the first. */
const later = (i: number) => (i < 6 ? i : i - 3);
const seconds = (i: number) => ((i % 6) * 0.04).toFixed(2);
const walkX = (i: number) => (5 + 3 * Math.sin(i * i + 1)).toFixed(3);
const walkY = (i: number) => (7 + 2 * Math.cos(3 * i * i)).toFixed(3);
const walkZ = (i: number) => (1 + Math.sin(7 * i * i + 2)).toFixed(3);

describe('by name', () => {
  test.each(
    ['track', 'Track ID', 'TrackID', 'track_id', 'Track No.', 'trackid', 'trajectory', 'Trajectory Number']
      .concat(['particle', 'Particle #', 'particle index', 'bead', 'Bead no', 'molecule', 'object id'])
      .concat(['cell', 'droplet', 'label', 'ID', 'id', 'TRACK']),
  )('"%s" is the track', (name) => {
    const { spec } = inspect(table(`x,y,t,${name}`, [walkX, walkY, seconds, id]));
    expect(spec.columns).toEqual({ x: 0, y: 1, z: null, time: 2, frame: null, track: 3 });
  });

  test.each(['t', 'T', 'time', 'Time', 'TIME', 'elapsed time', 'Time elapsed', 'timestamp', 'seconds'])(
    '"%s" is the time',
    (name) => {
      const { spec } = inspect(table(`x,y,${name},track`, [walkX, walkY, seconds, id]));
      expect(spec.columns).toMatchObject({ time: 2, frame: null });
    },
  );

  test.each(
    ['frame', 'Frame', 'frames', 'Frame No.', 'frame_number', 'FrameIndex', 'frameno', 'image', 'slice', 'f']
      .concat(['step', 'time step', 'time point', 'Time index', 'time (frames)', 'index'])
      .map((name) => [name]),
  )('"%s" counts frames', (name) => {
    const { spec, required } = inspect(table(`x,y,${name},track`, [walkX, walkY, count, id]));
    expect(spec.columns).toMatchObject({ time: null, frame: 2, track: 3 });
    expect(required).toEqual(['frameInterval']);
  });

  test.each([
    'x,y',
    'X,Y',
    'x position,y position',
    'pos_x,pos_y',
    'xpos,ypos',
    'Centroid X,Centroid Y',
    'centerx,centery',
    'x coordinate,y coordinate',
    'x location (µm),y location (µm)',
  ])('"%s" are positions', (names) => {
    const { spec } = inspect(table(`${names},t,track`, [walkX, walkY, seconds, id]));
    expect(spec.columns).toMatchObject({ x: 0, y: 1, z: null });
  });

  test.each(['position', 'displacement (nm)', 'Distance'])('"%s" alone is one axis', (name) => {
    const { spec } = inspect(table(`t,${name}`, [(i) => (i * 0.1).toFixed(1), walkX]));
    expect(spec.columns).toEqual({ track: null, time: 0, frame: null, x: 1, y: null, z: null });
  });

  test('columns that only sound alike are left alone', () => {
    const names = 'track,t,x,y,x_error,sigma x,dx,intensity,x min,quality';
    const fill = () => 0.1;
    const { spec } = inspect(table(names, [id, seconds, walkX, walkY, fill, fill, fill, fill, fill, fill]));
    expect(spec.columns).toEqual({ track: 0, time: 1, frame: null, x: 2, y: 3, z: null });
  });

  test('positions in a unit of length win over pixels, wherever they stand', () => {
    const columns = [id, count, walkX, walkY, walkX, walkY];
    expect(inspect(table('track,frame,x (px),y (px),x (µm),y (µm)', columns)).spec.columns).toMatchObject({
      x: 4,
      y: 5,
    });
    expect(inspect(table('track,frame,x (µm),y (µm),x (px),y (px)', columns)).spec.columns).toMatchObject({
      x: 2,
      y: 3,
    });
  });

  test('times win over frames, and this is said', () => {
    const { spec, notes, required } = inspect(
      table('track,frame,t (s),x,y', [id, count, seconds, walkX, walkY]),
    );
    expect(spec.columns).toMatchObject({ time: 2, frame: null });
    expect(notes.join(' ')).toContain('the times were used');
    expect(required).toEqual([]);
  });

  test.each(['T (°C)', 'T (K)', 'T [degC]', 'T (C)'])('"%s" is a temperature and no time', (name) => {
    const warm = () => '25.1';
    const timed = inspect(table(`track,${name},t (s),x,y`, [id, warm, seconds, walkX, walkY]));
    expect(timed.spec.columns).toMatchObject({ time: 2 });
    const framed = inspect(table(`track,${name},frame,x,y`, [id, warm, count, walkX, walkY]));
    expect(framed.spec.columns).toMatchObject({ time: null, frame: 2 });
  });

  test('a column "id" in which nothing repeats numbers the rows', () => {
    const { spec, notes } = inspect(table('id,t,x,y', [(i) => i, (i) => i * 0.1, walkX, walkY], 30));
    expect(spec.columns.track).toBeNull();
    expect(notes.join(' ')).toContain('all rows were taken as one track');
  });

  test('without a track, rows of one time are told of', () => {
    const { notes } = inspect(table('t,x,y', [seconds, walkX, walkY]));
    expect(notes.join(' ')).toContain('several rows have the same time');
  });

  test('a third axis counts where it is filled, and an empty one does not', () => {
    const names = 'track,t,x,y,z';
    expect(inspect(table(names, [id, seconds, walkX, walkY, walkZ])).spec.columns.z).toBe(4);
    for (const empty of ['', 'NaN']) {
      const text = table(names, [id, seconds, walkX, walkY, () => empty]);
      expect(inspect(text).spec.columns).toMatchObject({ x: 2, y: 3, z: null });
      expect(read(text).summary).toMatchObject({ dims: 2, badRows: 0 });
    }
  });

  test.each(['', 'NaN', 'n/a', '-'])(
    'positions may be missing (%j) in most rows, as where every frame has its row',
    (gap) => {
      const seen = (value: (i: number) => unknown) => (i: number) => (i % 5 === 0 ? value(i) : gap);
      const text = table('track,t,x,y', [() => 1, (i) => i, seen(walkX), seen(walkY)], 40);
      expect(inspect(text).spec.columns).toEqual({ track: 0, time: 1, frame: null, x: 2, y: 3, z: null });
      const outcome = read(text);
      expect(outcome.summary).toMatchObject({ rows: 40, frames: 8, badRows: 32 });
      expect(outcome.problemCount).toBe(32);
    },
  );

  test('a column that is called x and holds words is told of; no other one is taken for it', () => {
    const failure = refusal(table('track,t,x,y', [id, seconds, (i) => (i > 2 ? 'left' : ''), walkY]));
    expect(failure).toMatchObject({ code: 'no-positions', line: 5 });
    expect(failure.message).toContain('The column "x" should hold numbers, but has "left" in line 5');
  });

  test.each(['2026-05-04T10:00:00', '10:00:01'])('a time such as %s is told of', (moment) => {
    const failure = refusal(table('track,time,x,y', [id, () => moment, walkX, walkY]));
    expect(failure).toMatchObject({ code: 'no-positions', line: 2 });
    expect(failure.message).toContain(`The column "time" should hold numbers, but has "${moment}"`);
  });

  test('names are cut into words whatever they are, and never hang', () => {
    expect(wordsOf('TrackID')).toEqual(['track', 'id']);
    expect(wordsOf('Particle #')).toEqual(['particle', 'number']);
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (name) => {
        const words = wordsOf(name);
        expect(words.every((word) => word !== '' && !word.includes(' '))).toBe(true);
      }),
    );
  });
});

describe('by place', () => {
  test.each([
    [
      'track, time, x, y',
      [id, seconds, walkX, walkY],
      { track: 0, time: 1, frame: null, x: 2, y: 3, z: null },
    ],
    [
      'track, frame, x, y',
      [id, count, walkX, walkY],
      { track: 0, time: null, frame: 1, x: 2, y: 3, z: null },
    ],
    [
      'frame, x, y, track',
      [later, walkX, walkY, id],
      { track: 3, time: null, frame: 0, x: 1, y: 2, z: null },
    ],
    [
      'track, frame, time, x, y',
      [id, count, seconds, walkX, walkY],
      { track: 0, time: 2, frame: null, x: 3, y: 4, z: null },
    ],
    [
      'track, time, x, y, z',
      [id, seconds, walkX, walkY, walkZ],
      { track: 0, time: 1, frame: null, x: 2, y: 3, z: 4 },
    ],
    [
      'a track with words',
      [(i: number) => `bead ${id(i)}`, seconds, walkX, walkY],
      { track: 0, time: 1, frame: null, x: 2, y: 3, z: null },
    ],
  ])('%s', (_, columns, roles) => {
    const { spec, notes } = inspect(table(null, columns));
    expect(spec.columns).toEqual(roles);
    expect(notes.join(' ')).toContain('no column names; the columns were guessed');
  });

  test('time, x, y of one particle', () => {
    const { spec } = inspect(table(null, [(i) => (i * 0.1).toFixed(1), walkX, walkY]));
    expect(spec.columns).toEqual({ track: null, time: 0, frame: null, x: 1, y: 2, z: null });
  });

  test('names in another language are not understood; that they were not is said', () => {
    const { spec, notes } = inspect(table('Spur,Zeit,links,oben', [id, seconds, walkX, walkY]));
    expect(spec.columns).toEqual({ track: 0, time: 1, frame: null, x: 2, y: 3, z: null });
    expect(notes.join(' ')).toContain('The column names were not understood');
  });

  test('positions by name and a clock without a name: it is found, and this is said', () => {
    const { spec, notes } = inspect(table('track,when,x,y', [id, seconds, walkX, walkY]));
    expect(spec.columns).toEqual({ track: 0, time: 1, frame: null, x: 2, y: 3, z: null });
    expect(notes.join(' ')).toContain('"when" rises row by row');
  });
});

describe('what is not there is named', () => {
  test.each([
    ['x,y', [walkX, walkY], /^No column for time \(or frame\) was found; the columns are "x", "y"/],
    ['t,x1,y1', [seconds, walkX, walkY], /^No columns for position were found/],
    ['a,b', [walkX, walkY], /^No columns for time \(or frame\) and position were found/],
  ])('%s', (names, columns, reason) => {
    const failure = refusal(table(names, columns));
    expect(failure).toMatchObject({ code: 'no-positions', line: 1 });
    expect(failure.message).toMatch(reason);
  });

  test('of many columns the first eight are named', () => {
    const names = Array.from({ length: 20 }, (_, i) => `q${i}`).join(',');
    const failure = refusal(
      table(
        names,
        Array.from({ length: 20 }, () => walkX),
      ),
    );
    expect(failure.message).toContain('"q7" and 12 more');
  });

  test('all that is asked for, all that is assumed', () => {
    const framed = inspect(table('track,frame,x (px),y (px)', [id, count, walkX, walkY]));
    expect(framed.required).toEqual(['frameInterval', 'pixelSize']);
    expect(framed.assumed).toEqual(['exposure']);
    const bare = inspect(table('track,t,x,y', [id, seconds, walkX, walkY]));
    expect(bare.required).toEqual([]);
    expect(bare.assumed).toEqual(['exposure', 'lengthUnit', 'timeUnit']);
    expect(values(read(table('track,t,x,y', [id, seconds, walkX, walkY]))).time![1]).toBe(0.04);
  });
});
