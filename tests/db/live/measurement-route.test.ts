import fc from 'fast-check';
import { NextRequest } from 'next/server';
import { afterAll, afterEach, beforeAll, describe, expect, test, vi } from 'vitest';
import { measurementPage, NO_FILTERS } from '../../../db/inputs/measurement';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { byLooking, makeWorld, type Reader, type World } from './measurement-world';

/** Only the cookie is replaced: who its login belongs to, and what they may, is asked of the database as always. */
const session = vi.hoisted(() => ({ loginId: null as string | null }));
vi.mock('server-only', () => ({}));
vi.mock('next-auth', () => ({ getServerSession: async () => session }));

let database: TestDatabase;
let world: World;
let get: (query: string) => Promise<{ status: number; body: Record<string, unknown>; headers: Headers }>;
const logged = vi.spyOn(console, 'error').mockImplementation(() => undefined);

beforeAll(async () => {
  database = await createTestDatabase();
  world = await makeWorld(database, 11);
  Object.assign(process.env, {
    MOTEBOOK_DATABASE_APP: database.urls.motebook_app,
    MOTEBOOK_WS_URL: 'ws://127.0.0.1:4311',
    MOTEBOOK_FILES_ORIGIN: 'http://127.0.0.1:4312',
    MOTEBOOK_CACHE: '.cache',
    NEXTAUTH_URL: 'http://127.0.0.1:4310',
    NEXTAUTH_SECRET: 'only for this test, 32 characters',
    UPLOADTHING_TOKEN: 'none',
  });
  const { GET } = await import('../../../app/api/measurements/route');
  get = async (query) => {
    const request = new NextRequest(`http://127.0.0.1:4310/api/measurements${query}`);
    const response = await GET(request, { params: Promise.resolve({}) });
    return { status: response.status, body: await response.json(), headers: response.headers };
  };
});
afterAll(async () => {
  await globalThis.motebookDatabase?.$client.end();
  await database.drop();
});
afterEach(() => {
  session.loginId = null;
  logged.mockClear();
});

const signIn = ({ actor }: Reader) => {
  session.loginId = actor.loginId;
};

describe('GET /api/measurements', () => {
  test('gives a member what they may see, in the promised shape, for nobody to keep', async () => {
    signIn(world.actors.reader);
    const { status, body, headers } = await get('?verdict=free,directed&sort=d-asc&dFrom=0.05&limit=100');
    expect(status).toBe(200);
    expect(headers.get('cache-control')).toBe('private, no-store');
    const expected = byLooking(world, world.actors.reader, {
      ...NO_FILTERS,
      ...{ verdict: ['free', 'directed'], sort: 'd-asc', dFrom: 0.05 },
    });
    expect(expected.length).toBeGreaterThan(3);
    expect(measurementPage.parse(body).rows.map((row) => row.blockId)).toEqual(
      expected.map((row) => row.blockId),
    );
  });

  test('goes on where a page ended', async () => {
    signIn(world.actors.owner);
    const first = measurementPage.parse((await get('?limit=5')).body);
    const second = measurementPage.parse((await get(`?limit=5&after=${first.next}`)).body);
    const expected = byLooking(world, world.actors.owner, NO_FILTERS).slice(0, 10);
    expect([...first.rows, ...second.rows].map((row) => row.blockId)).toEqual(
      expected.map((row) => row.blockId),
    );
  });

  test('asks for a sign-in', async () => {
    expect(await get('')).toMatchObject({ status: 401, body: { code: 'not-signed-in' } });
    session.loginId = '4d1f7e9a-0000-4000-8000-000000000000';
    expect((await get('')).status).toBe(401);
  });

  test('refuses a login that has ended, and an account that is deactivated', async () => {
    const { actor } = world.actors.witness;
    signIn(world.actors.witness);
    expect((await get('')).status).toBe(200);
    await database.app.$client.query('UPDATE person SET active = false WHERE id = $1', [actor.personId]);
    expect((await get('')).status).toBe(401);
    await database.app.$client.query('UPDATE person SET active = true WHERE id = $1', [actor.personId]);
    await database.app.$client.query('UPDATE login SET ended_at = motebook_now() WHERE id = $1', [
      actor.loginId,
    ]);
    expect((await get('')).status).toBe(401);
  });

  test('gives an outsider an empty list', async () => {
    signIn(world.actors.outsider);
    expect(await get('')).toMatchObject({
      status: 200,
      body: { rows: [], next: null, summary: { total: { count: 0 } } },
    });
  });

  test.each([
    ['?dFrom=abc', 'dFrom'],
    ['?dFrom=', 'dFrom'],
    ['?dFrom=0,43', 'dFrom'],
    ['?dFrom=-1', 'dFrom'],
    ['?dTo=1e999', 'dTo'],
    ['?dTo=NaN', 'dTo'],
    ['?dTo=0x10', 'dTo'],
    ['?dFrom=2&dTo=1', 'dTo'],
    ['?range=near', 'range'],
    ['?verdict=free,fast', 'verdict.1'],
    ['?verdict=', 'verdict.0'],
    ['?verdict=free;directed', 'verdict.0'],
    ['?notebook=TRB', 'notebook.0'],
    ['?dateFrom=2026-02-30', 'dateFrom'],
    ['?dateFrom=0000-01-01', 'dateFrom'],
    ['?dateTo=02.03.2026', 'dateTo'],
    ['?dateFrom=2026-03-02&dateTo=2026-03-01', 'dateTo'],
    ['?sort=d', 'sort'],
    ['?sort=d-asc;drop table entry', 'sort'],
    ['?limit=0', 'limit'],
    ['?limit=1.5', 'limit'],
    ['?limit=101', 'limit'],
    ['?after=!!', 'after'],
    ['?after=bnVsbA', 'after'],
  ])('refuses %s and names the field', async (query, field) => {
    signIn(world.actors.owner);
    const { status, body } = await get(query);
    expect({ status, code: body.code }).toEqual({ status: 400, code: 'bad-input' });
    expect(Object.keys(body.fields as object)).toContain(field);
    expect(logged).not.toHaveBeenCalled();
  });

  test('refuses a place from a list sorted otherwise', async () => {
    signIn(world.actors.owner);
    const { body } = await get('?limit=2&sort=d-asc');
    expect(typeof body.next).toBe('string');
    expect((await get(`?sort=d-desc&after=${body.next}`)).status).toBe(400);
  });

  test('refuses a key given twice, and a key it does not know (S33)', async () => {
    signIn(world.actors.owner);
    expect((await get('?verdict=free&verdict=directed')).status).toBe(400);
    expect((await get('?owner=me')).status).toBe(400);
    expect((await get('?__proto__=me')).status).toBe(400);
    expect((await get('?constructor=me')).status).toBe(400);
  });
});

describe('hostile input (S29)', () => {
  const KEYS = [
    'dFrom',
    'dTo',
    'range',
    'verdict',
    'notebook',
    'dateFrom',
    'dateTo',
    'sort',
    'after',
    'limit',
  ];
  const HOSTILE = [
    "' or '1'='1",
    "1'; drop table block_result; --",
    '1) or true --',
    "free'::verdict) union select password_hash from person --",
    'd desc, (select pg_sleep(5))',
    '{free}',
    '%',
    '$1',
    '\\',
    '\0',
    'free\0',
    '\ud800',
    '\u202e0.43',
    '٠٫٤٣',
    'a'.repeat(5000),
    '1e308',
    '9'.repeat(400),
    '00000000-0000-0000-0000-000000000000',
    '2026-03-02 or 1=1',
    'infinity',
    Buffer.from('{"sort":"date-desc","d":null}').toString('base64url'),
    Buffer.from(
      JSON.stringify({
        ...{ sort: 'date-desc', d: 1, date: '2026-03-02', number: 1, position: 1, block: "x' or '1'='1" },
        entry: '0b0e6a3e-5b1d-4c7a-9f6e-2d1c0b9a8f7e',
      }),
    ).toString('base64url'),
    Buffer.from(
      JSON.stringify({
        ...{ sort: 'date-desc', d: 1, date: '2026-03-02', number: 1, position: 1, block: '\0' },
        entry: '0b0e6a3e-5b1d-4c7a-9f6e-2d1c0b9a8f7e',
      }),
    ).toString('base64url'),
  ];

  test('every key with every hostile value is refused or taken literally, never an error of ours', async () => {
    signIn(world.actors.guest);
    const mine = new Set(byLooking(world, world.actors.guest, NO_FILTERS).map((row) => row.blockId));
    for (const key of KEYS) {
      for (const value of HOSTILE) {
        const { status, body } = await get(`?${new URLSearchParams({ [key]: value })}`);
        expect([key, value, [200, 400].includes(status)]).toEqual([key, value, true]);
        if (status === 200) {
          expect(measurementPage.parse(body).rows.every((row) => mine.has(row.blockId))).toBe(true);
        }
      }
    }
    expect(logged).not.toHaveBeenCalled();
  });

  test('random keys and values too', async () => {
    signIn(world.actors.guest);
    await fc.assert(
      fc.asyncProperty(
        fc.dictionary(
          fc.constantFrom(...KEYS),
          fc.oneof(fc.string({ unit: 'binary' }), fc.constantFrom(...HOSTILE)),
        ),
        async (query) => {
          const { status } = await get(`?${new URLSearchParams(query)}`);
          expect([200, 400]).toContain(status);
        },
      ),
      { numRuns: 300, seed: 29 },
    );
    expect(logged).not.toHaveBeenCalled();
  });
});
