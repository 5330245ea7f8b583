import { mkdtempSync, rmSync } from 'node:fs';
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { eq } from 'drizzle-orm';
import { NextRequest } from 'next/server';
import { afterAll, beforeAll, describe, expect, test, vi } from 'vitest';
import { inspectFile } from '../../../analysis/intake/inspect-file';
import { startFileService, type RunningFileService } from '../../../app/_server/fakes/file-service';
import { MAX_UPLOAD_BYTES } from '../../../db/files/policy';
import type { Actor } from '../../../db/policies/may';
import { AnalysisWorker } from '../../../db/worker/analysis-worker';
import { newAnalysisThread } from '../../../db/worker/new-thread';
import { attachment, reading } from '../../../db/schema/index';
import { makeMember, makePerson } from '../../helpers/factories';
import { golden, sha256, World } from '../../ws-server/projector/world';

/**
 * A file's way into an entry: the product's own route handlers behind a real HTTP server, the real upload SDK on the server's
 * side, and the local stand-in of its service. Only the cookie is replaced.
 */
const session = vi.hoisted(() => ({ loginId: null as string | null }));
vi.mock('server-only', () => ({}));
vi.mock('next-auth', () => ({ getServerSession: async () => (session.loginId ? session : null) }));

let world: World;
let files: RunningFileService;
let product: Server;
let origin: string;
let folder: string;
let entryId: string;
const people: Record<string, Actor | null> = { nobody: null };

type Handler = (request: NextRequest, context: { params: Promise<{ id: string }> }) => Promise<Response>;

beforeAll(async () => {
  // The SDK's server half talks much of its own accord.
  vi.spyOn(console, 'warn').mockImplementation(() => undefined);
  vi.spyOn(console, 'error').mockImplementation(() => undefined);
  world = await World.create();
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-uploads-'));
  const apiKey = 'sk_live_only_for_this_test';
  files = await startFileService({ port: 0, folder: path.join(folder, 'files'), apiKey, appId: 'testapp' });
  product = createServer();
  await new Promise<void>((resolve) => product.listen(0, '127.0.0.1', resolve));
  origin = `http://127.0.0.1:${(product.address() as AddressInfo).port}`;
  const token = { apiKey, appId: 'testapp', regions: ['local'], ingestHost: 'localhost' };
  const service = `http://127.0.0.1:${files.port}`;
  Object.assign(process.env, {
    MOTEBOOK_DATABASE_APP: world.database.urls.motebook_app,
    MOTEBOOK_WS_URL: 'ws://127.0.0.1:4311',
    MOTEBOOK_FILES_ORIGIN: service,
    MOTEBOOK_CACHE: path.join(folder, 'cache'),
    NEXTAUTH_URL: origin,
    NEXTAUTH_SECRET: 'only for this test, 32 characters',
    UPLOADTHING_TOKEN: Buffer.from(JSON.stringify(token)).toString('base64'),
    UPLOADTHING_INGEST_URL: service,
    UPLOADTHING_API_URL: service,
    UPLOADTHING_UFS_HOST: `localhost:${files.port}`,
    UPLOADTHING_UFS_APP_ID_LOCATION: 'path',
  });
  // The web process makes its thread from the bundle; here the sources are run as they are.
  globalThis.motebookAnalysisWorker = new AnalysisWorker({ create: () => newAnalysisThread() });
  const uploads = await import('../../../app/api/uploadthing/route');
  product.on('request', (request, response) => void passOn(request, response));
  const passOn = async (request: IncomingMessage, response: ServerResponse) => {
    const body: Buffer[] = [];
    for await (const chunk of request) body.push(chunk as Buffer);
    const answer = await uploads.POST(
      new NextRequest(`${origin}${request.url}`, {
        method: 'POST',
        body: Buffer.concat(body),
        headers: request.headers as Record<string, string>,
      }),
    );
    response
      .writeHead(answer.status, Object.fromEntries(answer.headers))
      .end(Buffer.from(await answer.arrayBuffer()));
  };
  entryId = await world.newEntry();
  people.author = world.author;
  for (const role of ['editor', 'reader', 'witness'] as const) {
    people[role] = await makePerson(world.db);
    await makeMember(world.db, world.notebookId, people[role], role);
  }
  people.guest = await makePerson(world.db, { role: 'guest' });
  await makeMember(world.db, world.notebookId, people.guest, 'reader');
  people.outsider = await makePerson(world.db, { admin: true });
});
afterAll(async () => {
  await globalThis.motebookAnalysisWorker?.stop();
  product.closeAllConnections();
  await new Promise((resolve) => product.close(resolve));
  await files.stop();
  await globalThis.motebookDatabase?.$client.end();
  await world.end();
  rmSync(folder, { recursive: true, force: true });
});

const as = (name: string) => (session.loginId = people[name]?.loginId ?? null);

/** Asks for a place to put a file, as the browser's half of the SDK does. */
async function ask(name: string, size: number, more: { from?: string; entry?: string } = {}) {
  const response = await fetch(`${origin}/api/uploadthing?actionType=upload&slug=trajectory`, {
    method: 'POST',
    headers: {
      'Content-Type': 'application/json',
      'x-uploadthing-package': 'test',
      'x-uploadthing-version': '7.7.4',
      Origin: more.from ?? origin,
    },
    body: JSON.stringify({
      files: [{ name, size, type: 'text/csv', lastModified: 0 }],
      input: { entryId: more.entry ?? entryId },
    }),
  });
  const body = (await response.json()) as { url: string; key: string }[] & { message?: string };
  return { status: response.status, body };
}

/** Sends bytes to the place that was given, from some byte on. */
async function send(url: string, bytes: Uint8Array, from = 0): Promise<{ status: number; body: Sent }> {
  const form = new FormData();
  form.append('file', new Blob([bytes.slice(from) as BlobPart]), 'file');
  const response = await fetch(url, { method: 'PUT', body: form, headers: { Range: `bytes=${from}-` } });
  return { status: response.status, body: (await response.json()) as Sent };
}
interface Sent {
  serverData?: { attachmentId: string; name: string; bytes: number; sha256: string };
  error?: string;
}

async function upload(name: string, bytes: Uint8Array): Promise<string> {
  as('editor');
  const { body } = await ask(name, bytes.length);
  const sent = await send(body[0]!.url, bytes);
  if (!sent.body.serverData) throw new Error(JSON.stringify(sent));
  return sent.body.serverData.attachmentId;
}

/** Calls a route handler of the product directly. */
async function call(
  module: Promise<Record<string, unknown>>,
  who: string,
  id: string,
  body?: unknown,
): Promise<Response> {
  as(who);
  const handler = (await module)[body === undefined ? 'GET' : 'POST'] as Handler;
  const request = new NextRequest(`${origin}/x`, {
    method: body === undefined ? 'GET' : 'POST',
    headers: { Origin: origin, 'Content-Type': 'application/json' },
    ...(body === undefined ? {} : { body: JSON.stringify(body) }),
  });
  return handler(request, { params: Promise.resolve({ id }) });
}
const download = (who: string, id: string) =>
  call(import('../../../app/api/attachments/[id]/route'), who, id);
const makeReading = (who: string, id: string, spec: unknown) =>
  call(import('../../../app/api/attachments/[id]/readings/route'), who, id, { spec });

describe('who may upload', () => {
  test.each([
    ['author', 200],
    ['editor', 200],
    ['reader', 403],
    ['witness', 403],
    ['guest', 403],
    ['outsider', 404],
    ['nobody', 403],
  ])('%s: %i', async (who, status) => {
    as(who);
    const { status: answered, body } = await ask('tracks.csv', 100);
    expect(answered).toBe(status);
    if (status === 200) expect(body[0]!.url).toContain(`:${files.port}/`);
    else expect(body.message?.length).toBeGreaterThan(15);
  });

  test('a page of another origin may not, whoever is signed in', async () => {
    as('editor');
    expect((await ask('tracks.csv', 100, { from: 'http://elsewhere.example' })).status).toBe(403);
  });

  test('a file over the limit is refused before a byte is sent, with its size and the remedy', async () => {
    as('editor');
    const { status, body } = await ask('long film.csv', MAX_UPLOAD_BYTES + 1);
    expect(status).toBe(413);
    expect(body.message).toMatch(/"long film\.csv" has 20\.0 MB; up to 20 MB/);
  });
});

describe('what is kept', () => {
  test('size and SHA-256 are measured on what arrived', async () => {
    const bytes = golden('g14_short.csv');
    const id = await upload('short.csv', bytes);
    const [row] = await world.db.select().from(attachment).where(eq(attachment.id, id));
    expect(row).toMatchObject({ entryId, name: 'short.csv', bytes: bytes.length, sha256: sha256(bytes) });
    expect(row!.personId).toBe(people.editor!.personId);
  });

  test('a name is data: paths, control and direction characters are taken out', async () => {
    const id = await upload('../../etc/\u202egpj.exe\u0000.csv', golden('g14_short.csv'));
    const [row] = await world.db.select().from(attachment).where(eq(attachment.id, id));
    expect(row!.name).toBe('....etcgpj.exe.csv');
  });

  test('an upload that broke off goes on where it stopped', async () => {
    as('editor');
    const bytes = golden('g05_free_gaps.csv');
    const { body } = await ask('gaps.csv', bytes.length);
    const { url } = body[0]!;
    // The first half arrives, then the line is cut.
    const form = `--b\r\nContent-Disposition: form-data; name="file"; filename="f"\r\n\r\n`;
    const half = Buffer.concat([Buffer.from(form), bytes.subarray(0, 20_000)]);
    await fetch(url, {
      method: 'PUT',
      body: half,
      headers: { 'Content-Type': 'multipart/form-data; boundary=b' },
    }).catch(() => null);
    const head = await fetch(url, { method: 'HEAD' });
    expect(head.headers.get('x-ut-range-start')).toBe('20000');
    const wrong = await send(url, bytes, 10_000);
    expect(wrong.status).toBe(416);
    const rest = await send(url, bytes, 20_000);
    expect(rest.body.serverData).toMatchObject({ bytes: bytes.length, sha256: sha256(bytes) });
  });
});

describe('the service believes nothing that is not signed', () => {
  test.each([
    ['another size', (url: string) => url.replace(/x-ut-file-size=\d+/, 'x-ut-file-size=999999')],
    ['another time limit', (url: string) => url.replace(/expires=\d+/, 'expires=99999999999999')],
    [
      'another signature',
      (url: string) => url.replace(/signature=.*$/, `signature=hmac-sha256%3D${'0'.repeat(64)}`),
    ],
    ['no signature', (url: string) => url.replace(/&signature=.*$/, '')],
  ])('%s', async (_, change) => {
    as('editor');
    const bytes = golden('g14_short.csv');
    const { body } = await ask('short.csv', bytes.length);
    const changed = change(body[0]!.url);
    expect(changed).not.toBe(body[0]!.url);
    expect(await send(changed, bytes)).toMatchObject({ status: 403 });
  });

  test('more bytes than were announced are thrown away', async () => {
    as('editor');
    const { body } = await ask('short.csv', 50);
    expect(await send(body[0]!.url, golden('g14_short.csv'))).toMatchObject({ status: 400 });
  });

  test('a call without the key, an address that is not a key', async () => {
    const service = `http://127.0.0.1:${files.port}`;
    expect((await fetch(`${service}/v6/deleteFiles`, { method: 'POST', body: '{}' })).status).toBe(401);
    expect((await fetch(`${service}/f/..%2f..%2fetc%2fpasswd`)).status).toBeGreaterThanOrEqual(400);
  });

  test('a completion that nobody signed makes no attachment', async () => {
    const before = (await world.db.select().from(attachment)).length;
    const response = await fetch(`${origin}/api/uploadthing?slug=trajectory`, {
      method: 'POST',
      headers: {
        'Content-Type': 'application/json',
        'uploadthing-hook': 'callback',
        'x-uploadthing-signature': `hmac-sha256=${'0'.repeat(64)}`,
        'x-uploadthing-package': 'test',
        'x-uploadthing-version': '7.7.4',
      },
      body: JSON.stringify({
        status: 'uploaded',
        metadata: { ticketId: 'x' },
        origin,
        file: {
          key: 'k',
          name: 'n',
          size: 1,
          type: 't',
          customId: null,
          url: 'u',
          appUrl: 'u',
          ufsUrl: 'u',
          fileHash: 'h',
        },
      }),
    });
    expect(response.status).toBeGreaterThanOrEqual(400);
    expect((await world.db.select().from(attachment)).length).toBe(before);
  });
});

describe('download', () => {
  test.each([
    ['author', 200],
    ['reader', 200],
    ['witness', 200],
    ['guest', 200],
    ['outsider', 404],
    ['nobody', 401],
  ])('%s: %i', async (who, status) => {
    const bytes = golden('g14_short.csv');
    const id = await upload('down.csv', bytes);
    const response = await download(who, id);
    expect(response.status).toBe(status);
    if (status === 200) expect(Buffer.from(await response.arrayBuffer()).equals(bytes)).toBe(true);
  });

  test('whatever it contains, a browser only saves it', async () => {
    const id = await upload('page "ä".html', Buffer.from('<script>alert(1)</script>'));
    const { headers } = await download('reader', id);
    expect(headers.get('Content-Type')).toBe('application/octet-stream');
    expect(headers.get('Content-Disposition')).toMatch(
      /^attachment; filename="page ___\.html"; filename\*=UTF-8''page%20%22%C3%A4%22\.html$/,
    );
    expect(headers.get('X-Content-Type-Options')).toBe('nosniff');
    expect(headers.get('Content-Security-Policy')).toContain('sandbox');
    expect(headers.get('Cache-Control')).toContain('no-store');
  });

  test('an id that is none, or nobody’s, is not there', async () => {
    expect((await download('author', 'x')).status).toBe(404);
    expect((await download('author', crypto.randomUUID())).status).toBe(404);
  });
});

describe('readings', () => {
  const bytes = golden('g14_short.csv');
  const inspection = inspectFile(bytes, 'short.csv');
  if (inspection.failed) throw new Error(inspection.message);
  const { spec } = inspection;

  test('are made by those who write the entry, from what the server reads itself', async () => {
    const id = await upload('short.csv', bytes);
    for (const [who, status] of [
      ['reader', 403],
      ['outsider', 404],
      ['nobody', 401],
    ] as const)
      expect((await makeReading(who, id, spec)).status).toBe(status);
    const made = await makeReading('editor', id, spec);
    expect(made.status).toBe(200);
    const { readingId, hash } = (await made.json()) as { readingId: string; hash: string };
    const [row] = await world.db.select().from(reading).where(eq(reading.id, readingId));
    expect(row).toMatchObject({
      attachmentId: id,
      hash,
      spec,
      summary: { rows: 25, tracks: 1 },
      problems: 0,
    });
    // The same reading of the same file is the same thing.
    expect(await (await makeReading('author', id, spec)).json()).toEqual({ readingId, hash });
    const other = await (await makeReading('author', id, { ...spec, exposure: { fraction: '1' } })).json();
    expect(other).not.toMatchObject({ readingId });
  });

  test('that read nothing, or are none, are refused with a sentence and not kept', async () => {
    const id = await upload('words.csv', Buffer.from('Dear colleague,\nthe tracks are coming.\n'));
    const before = (await world.db.select().from(reading)).length;
    for (const wrong of [
      spec,
      { ...spec, columns: { ...spec.columns, x: 99 } },
      { ...spec, dialect: { ...spec.dialect, delimiter: 'x' } },
      {},
    ]) {
      const response = await makeReading('editor', id, wrong);
      expect([400, 422]).toContain(response.status);
      const { sentence } = (await response.json()) as { sentence: string };
      expect(sentence.length).toBeGreaterThan(20);
      expect(sentence).not.toContain('unexpectedly');
    }
    expect((await world.db.select().from(reading)).length).toBe(before);
  });
});
