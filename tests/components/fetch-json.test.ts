import { afterEach, expect, test, vi } from 'vitest';
import { z } from 'zod';
import { fetchJson } from '@/components/fetch-json';
import { ERRORS } from '@/db/errors';

/** What a page says when an answer does not come as it should. */
const shape = z.object({ n: z.number() });
const answer = (body: BodyInit, status = 200) =>
  vi.stubGlobal('fetch', () => Promise.resolve(new Response(body, { status })));

/** An answer whose body breaks off with `error`. */
const broken = (error: Error) =>
  new ReadableStream({
    start(controller) {
      controller.enqueue(new TextEncoder().encode('{"n":'));
    },
    pull(controller) {
      controller.error(error);
    },
  });

afterEach(() => {
  vi.unstubAllGlobals();
  vi.restoreAllMocks();
});

test('an answer of the right shape is handed on', async () => {
  answer('{"n":3}');
  expect(await fetchJson('/api/x', shape)).toEqual({ n: 3 });
});

test.each([
  ['of another shape', '{"n":"3"}'],
  ['that is no JSON', '<html>'],
])('an answer %s asks for a reload', async (_what, body) => {
  const said = vi.spyOn(console, 'error').mockImplementation(() => undefined);
  answer(body);
  await expect(fetchJson('/api/x', shape)).rejects.toMatchObject({
    status: 502,
    sentence: 'This page and the server do not fit together any more. Reload the page.',
  });
  expect(said).toHaveBeenCalledOnce();
});

test('a line that breaks in the middle of an answer is told as that, and not as a page that is too old', async () => {
  const said = vi.spyOn(console, 'error').mockImplementation(() => undefined);
  answer(broken(new TypeError('network error')));
  await expect(fetchJson('/api/x', shape)).rejects.toMatchObject({
    status: 503,
    sentence: 'The server cannot be reached. Check the connection, then try again.',
  });
  expect(said).not.toHaveBeenCalled();
});

test('a request that the page gave up is no fault at all, before the answer and in the middle of it', async () => {
  const said = vi.spyOn(console, 'error').mockImplementation(() => undefined);
  const gaveUp = () => new DOMException('given up', 'AbortError');
  vi.stubGlobal('fetch', () => Promise.reject(gaveUp()));
  await expect(fetchJson('/api/x', shape)).rejects.toMatchObject({ name: 'AbortError' });
  answer(broken(gaveUp()));
  await expect(fetchJson('/api/x', shape)).rejects.toMatchObject({ name: 'AbortError' });
  expect(said).not.toHaveBeenCalled();
});

test("a refusal carries the server's sentence, and a plain one when there is none", async () => {
  answer(JSON.stringify({ code: 'forbidden', sentence: 'You may not.', fields: { a: 'b' } }), 403);
  await expect(fetchJson('/api/x', shape)).rejects.toMatchObject({
    status: 403,
    sentence: 'You may not.',
    fields: { a: 'b' },
  });
  answer('', 500);
  await expect(fetchJson('/api/x', shape)).rejects.toMatchObject({
    status: 500,
    sentence: ERRORS.unexpected.sentence,
  });
});
