import { NextRequest } from 'next/server';
import { afterAll, beforeAll, expect, test, vi } from 'vitest';
import { blockAnswer } from '../../../db/inputs/block-answer';
import type { Actor } from '../../../db/policies/may';
import { makeMember, makePerson } from '../../helpers/factories';
import { block, World } from '../../ws-server/projector/world';

/** Only the cookie is replaced: who its login belongs to, and what they may, is asked of the database as always. */
const session = vi.hoisted(() => ({ loginId: null as string | null }));
vi.mock('server-only', () => ({}));
vi.mock('next-auth', () => ({ getServerSession: async () => session }));

let world: World;
let entryId: string;
let get: (actor: Actor | null, id: string) => Promise<{ status: number; body: Record<string, unknown> }>;

beforeAll(async () => {
  world = await World.create();
  Object.assign(process.env, {
    MOTEBOOK_DATABASE_APP: world.database.urls.motebook_app,
    MOTEBOOK_WS_URL: 'ws://127.0.0.1:4311',
    MOTEBOOK_FILES_ORIGIN: 'http://127.0.0.1:4312',
    MOTEBOOK_CACHE: '.cache',
    NEXTAUTH_URL: 'http://127.0.0.1:4310',
    NEXTAUTH_SECRET: 'only for this test, 32 characters',
    UPLOADTHING_TOKEN: 'none',
  });
  const { GET } = await import('../../../app/api/entries/[id]/blocks/route');
  get = async (actor, id) => {
    session.loginId = actor?.loginId ?? null;
    const request = new NextRequest(`http://127.0.0.1:4310/api/entries/${id}/blocks`);
    const response = await GET(request, { params: Promise.resolve({ id }) });
    return { status: response.status, body: await response.json() };
  };
  await world.start();
  entryId = await world.newEntry();
  const readingId = await world.addReading(entryId, 'g14_short.csv');
  await world.append(entryId, block({ readingIds: [readingId] }), block({}));
  await world.wait(entryId, 'done');
});
afterAll(async () => {
  await globalThis.motebookDatabase?.$client.end();
  await world.end();
});

test('gives a reader of the notebook the blocks in the promised shape, each with its file and engine', async () => {
  const reader = await makePerson(world.db);
  await makeMember(world.db, world.notebookId, reader, 'reader');
  const { status, body } = await get(reader, entryId);
  expect(status).toBe(200);
  // Strict about the outside: a column that joins the table must not join the answer by itself.
  const answer = blockAnswer.strict().parse(body);
  expect(answer.blocks.map((one) => [one.position, one.status])).toEqual([
    [1, 'done'],
    [2, 'empty'],
  ]);
  const [first] = answer.blocks;
  expect(first?.result?.readingHashes).toEqual(first?.readings.map((one) => one.hash));
  expect(first?.engine).toBe(first?.result?.engine);
  expect(first?.readings[0]?.sha256).toMatch(/^[0-9a-f]{64}$/);
  expect(Date.parse(first?.computedAt ?? '')).not.toBeNaN();
  expect(answer.available.map((one) => one.id)).toEqual(first?.readingIds);
});

test('asks for a sign-in', async () => {
  expect(await get(null, entryId)).toMatchObject({ status: 401, body: { code: 'not-signed-in' } });
});

test('an entry of another notebook, an unknown id and no id at all look alike', async () => {
  const outsider = await makePerson(world.db, { role: 'pi', admin: true });
  const answers = await Promise.all(
    [entryId, '4d1f7e9a-0000-4000-8000-000000000000', 'no-id'].map((id) => get(outsider, id)),
  );
  for (const answer of answers) expect(answer).toEqual(answers[0]);
  expect(answers[0]).toMatchObject({ status: 404, body: { code: 'not-found' } });
});
