import { count, eq } from 'drizzle-orm';
import Papa from 'papaparse';
import { afterAll, beforeAll, describe, expect, test, vi } from 'vitest';
import type { ReadingSpec } from '../../../analysis/intake/types';
import type { IntakeAnswer } from '../../../analysis/worker/messages';
import { attachment, audit, reading } from '../../../db/schema/index';
import { golden } from '../../ws-server/projector/world';
import { UploadWorld } from './upload-world';

/** From an attached file to a reading: what is understood, what has to be stated, what is kept, and for whom. */
const session = vi.hoisted(() => ({ loginId: null as string | null }));
vi.mock('server-only', () => ({}));
vi.mock('next-auth', () => ({ getServerSession: async () => (session.loginId ? session : null) }));

let world: UploadWorld;
beforeAll(async () => {
  // The SDK warns of old fields in answers.
  vi.spyOn(console, 'warn').mockImplementation(() => undefined);
  world = await UploadWorld.create(session);
});
afterAll(() => world.end());

const intakeRoute = () => import('../../../app/api/attachments/[id]/intake/route');
const readingRoute = () => import('../../../app/api/attachments/[id]/readings/route');
const problemRoute = () => import('../../../app/api/attachments/[id]/problems/route');
const file = async (name: string, text: string | Buffer) =>
  (await world.upload(name, Buffer.from(text as string))).attachmentId;
const rows = (id: string) => world.db.select().from(reading).where(eq(reading.attachmentId, id));

async function understand(id: string, body: unknown = {}, who = 'editor'): Promise<IntakeAnswer> {
  const response = await world.call(intakeRoute(), who, id, body);
  expect(response.status).toBe(200);
  return (await response.json()) as IntakeAnswer;
}
async function specOf(id: string): Promise<ReadingSpec> {
  const { inspection } = await understand(id);
  if (inspection.failed) throw new Error(inspection.message);
  return inspection.spec;
}
async function confirm(id: string, spec: unknown, who = 'editor', more: object = {}) {
  const response = await world.call(readingRoute(), who, id, { spec, ...more });
  const body = (await response.json()) as Record<string, unknown> & { fields?: Record<string, string> };
  return { status: response.status, body };
}

/** A track of `n` points, 20 ms apart, whose numbers are exact decimals. */
const walk = (n: number, cell: (i: number) => string) =>
  `track,time (s),x (um),y (um)\n${Array.from({ length: n }, (_, i) => `1,${(i * 0.02).toFixed(2)},${cell(i)},0.${i % 7}`).join('\n')}\n`;
const plain = walk(12, (i) => `0.${i % 9}`);

describe('understanding a file', () => {
  test('is for those who may read the entry, and changes nothing', async () => {
    const id = await file('tracks.csv', plain);
    const counts = async () =>
      Promise.all(
        [reading, attachment, audit].map(
          async (table) => (await world.db.select({ n: count() }).from(table))[0]!.n,
        ),
      );
    const before = await counts();
    for (const who of ['author', 'reader', 'witness']) {
      const { read } = await understand(id, {}, who);
      expect(read).toMatchObject({ failed: false, summary: { rows: 12, tracks: 1, frameInterval: 0.02 } });
    }
    expect((await world.call(intakeRoute(), 'outsider', id, {})).status).toBe(404);
    expect((await world.call(intakeRoute(), 'nobody', id, {})).status).toBe(401);
    expect(await counts()).toEqual(before);
  });

  test('says in a type and a place why a file is none', async () => {
    const cases: [string, string | Buffer, object][] = [
      ['empty.csv', '', { code: 'empty' }],
      ['picture.png', Buffer.from('89504e470d0a1a0a0000000d49484452', 'hex'), { code: 'binary' }],
      ['words.txt', 'Dear colleague,\nthe tracks are coming.\n', { code: expect.stringMatching(/^no-/) }],
      ['wide.csv', `${'x,'.repeat(1500)}x\n${'1,'.repeat(1500)}1\n`, { code: 'too-wide', line: 1 }],
    ];
    for (const [name, content, expected] of cases) {
      const { inspection, read } = await understand(await file(name, content));
      expect([name, inspection]).toEqual([name, expect.objectContaining({ failed: true, ...expected })]);
      expect(read).toBeNull();
    }
  });
});

describe('a reading that cannot be made yet', () => {
  test('frames without an interval: the interval is asked for, and nothing is kept until it is stated', async () => {
    const id = await file('frames.csv', 'track,frame,x (um),y (um)\n1,0,0,0\n1,1,0.1,0\n1,2,0.2,0.1\n');
    const { inspection, read } = await understand(id);
    expect(inspection).toMatchObject({ failed: false, required: ['frameInterval'] });
    expect(read).toBeNull();
    const spec = await specOf(id);
    const refused = await confirm(id, spec);
    expect(refused).toMatchObject({ status: 422, body: { code: 'unreadable' } });
    expect(Object.keys(refused.body.fields ?? {})).toEqual(['frameInterval']);
    expect(await rows(id)).toEqual([]);
    expect((await confirm(id, { ...spec, frameInterval: '0.02' })).status).toBe(200);
    expect(await rows(id)).toMatchObject([
      { summary: { frameInterval: 0.02 }, spec: { frameInterval: '0.02' } },
    ]);
  });

  test('pixels without their size: the size is asked for', async () => {
    const id = await file('pixels.csv', golden('g13_pixels_frames.csv'));
    const spec = { ...(await specOf(id)), frameInterval: '0.05' };
    const refused = await confirm(id, { ...spec, pixelSize: null });
    expect(refused.status).toBe(422);
    expect(Object.keys(refused.body.fields ?? {})).toEqual(['pixelSize']);
    expect((await confirm(id, { ...spec, pixelSize: '0.1' })).status).toBe(200);
  });

  test('an interval that the times of the file contradict is refused, with both numbers', async () => {
    const id = await file('tracks.csv', plain);
    const spec = await specOf(id);
    const wrong = { ...spec, frameInterval: '0.2' };
    expect((await understand(id, { spec: wrong })).read).toMatchObject({
      failed: true,
      code: 'frame-interval-contradicts',
    });
    const refused = await confirm(id, wrong);
    expect(refused).toMatchObject({ status: 422, body: { code: 'unreadable' } });
    expect(refused.body.fields?.frameInterval).toMatch(/0\.02 s .* 0\.2 s/);
    expect(await rows(id)).toEqual([]);
    expect((await confirm(id, { ...spec, frameInterval: '0.02' })).status).toBe(200);
  });

  test('columns in which no row can be read are refused, with the first line and the reason', async () => {
    const id = await file(
      'tracks.csv',
      walk(5, () => 'lost'),
    );
    const spec = await specOf(await file('good.csv', plain));
    const refused = await confirm(id, spec);
    expect(refused).toMatchObject({ status: 422, body: { fields: { line: '2' } } });
    expect(refused.body.sentence).toMatch(/line 2/);
    const beyond = await confirm(id, { ...spec, columns: { ...spec.columns, y: 40 } });
    expect(beyond.body).toMatchObject({ code: 'unreadable', fields: { line: '2' } });
    expect(beyond.body.sentence).toContain('Column 41');
    expect(await rows(id)).toEqual([]);
  });
});

describe('a reading', () => {
  test('keeps how many rows it could not use; which, with line and reason, can be had as a file', async () => {
    // Lines 4 and 8 of the file: a word, and a line that a spreadsheet would run.
    const text = walk(12, (i) => (i === 2 ? 'lost' : `0.${i % 9}`)).replace('1,0.12,0.6,', '=A1,0.12,+,');
    const id = await file('gaps.csv', text);
    const spec = await specOf(id);
    // What a browser says of what it has found is not asked for, and not kept.
    const made = await confirm(id, spec, 'editor', { summary: { rows: 99, badRows: 0 }, problems: 0 });
    expect(made.status).toBe(200);
    // The two keep their place as gaps of one frame each.
    const summary = { rows: 12, badRows: 2, tracks: 1, longestTrackFrames: 10, gaps: 2, missingFrames: 2 };
    expect(await rows(id)).toMatchObject([{ problems: 2, summary }]);
    const response = await world.call(problemRoute(), 'reader', id, { spec });
    expect(response.headers.get('Content-Disposition')).toContain('gaps.csv-unusable-rows.csv');
    expect(response.headers.get('X-Content-Type-Options')).toBe('nosniff');
    const { data } = Papa.parse<string[]>(await response.text(), { skipEmptyLines: true });
    expect(data.map((row) => row[0])).toEqual(['line', '4', '8']);
    expect(data[2]).toEqual(['8', 'x "+" is not a number', "'=A1,0.12,+,0.6"]);
    expect((await world.call(problemRoute(), 'outsider', id, { spec })).status).toBe(404);
  });

  test('confirmed several times at the same moment is one', async () => {
    const id = await file('tracks.csv', plain);
    const spec = await specOf(id);
    const made = await Promise.all([confirm(id, spec), confirm(id, spec), confirm(id, spec)]);
    expect(made.map(({ status }) => status)).toEqual([200, 200, 200]);
    expect(new Set(made.map(({ body }) => body.readingId)).size).toBe(1);
    expect(await rows(id)).toHaveLength(1);
  });

  test('of a file of an entry that one may only read, or not see, is not made', async () => {
    const id = await file('tracks.csv', plain);
    const spec = await specOf(id);
    for (const [who, status] of [
      ['reader', 403],
      ['witness', 403],
      ['outsider', 404],
      ['nobody', 401],
    ] as const) {
      expect([who, (await confirm(id, spec, who)).status]).toEqual([who, status]);
    }
    expect((await confirm(crypto.randomUUID(), spec)).status).toBe(404);
    expect((await confirm('no-id', spec)).status).toBe(404);
    expect(await rows(id)).toEqual([]);
  });

  test('that is none is refused before the file is touched, with what is wrong', async () => {
    const id = await file('tracks.csv', plain);
    const spec = await specOf(id);
    const wrong: [unknown, string][] = [
      [null, 'spec'],
      ['x', 'spec'],
      [{ ...spec, columns: { ...spec.columns, x: 1000 } }, 'spec.columns.x'],
      [{ ...spec, columns: { ...spec.columns, x: -1 } }, 'spec.columns.x'],
      [{ ...spec, columns: { ...spec.columns, x: 1.5 } }, 'spec.columns.x'],
      [{ ...spec, dialect: { ...spec.dialect, delimiter: '::' } }, 'spec.dialect.delimiter'],
      [{ ...spec, dialect: { ...spec.dialect, encoding: 'utf-7' } }, 'spec.dialect.encoding'],
      [{ ...spec, frameInterval: '-0.02' }, 'spec.frameInterval'],
      [{ ...spec, frameInterval: '0' }, 'spec.frameInterval'],
      [{ ...spec, frameInterval: '0,02' }, 'spec.frameInterval'],
      [{ ...spec, frameInterval: 'Infinity' }, 'spec.frameInterval'],
      [{ ...spec, frameInterval: 0.02 }, 'spec.frameInterval'],
      [{ ...spec, exposure: { fraction: '1.5' } }, 'spec.exposure.fraction'],
      [{ ...spec, units: { ...spec.units, x: 'inch' } }, 'spec.units.x'],
    ];
    for (const [one, place] of wrong) {
      const { status, body } = await confirm(id, one);
      expect([status, body.code, Object.keys(body.fields ?? {})]).toEqual([400, 'bad-input', [place]]);
    }
    expect((await confirm(id, { ...spec, parser: 'of another time' })).status).toBe(422);
    expect(await rows(id)).toEqual([]);
  });

  test('is asked for from this product’s own pages only, as JSON of a sensible size', async () => {
    const id = await file('tracks.csv', plain);
    const body = { spec: await specOf(id) };
    const ask = async (headers: Record<string, string>, what: unknown = body) =>
      (await world.call(readingRoute(), 'editor', id, what, headers)).status;
    expect(await ask({ Origin: 'http://elsewhere.example' })).toBe(403);
    expect(await ask({ Origin: '' })).toBe(403);
    expect(await ask({ 'Content-Type': 'text/plain' })).toBe(400);
    expect(await ask({ 'Content-Type': 'application/x-www-form-urlencoded' })).toBe(400);
    expect(await ask({}, '{"spec":')).toBe(400);
    expect(await ask({}, { ...body, more: 'x'.repeat(1_100_000) })).toBe(413);
    expect(await rows(id)).toEqual([]);
    expect(await ask({})).toBe(200);
  });
});
