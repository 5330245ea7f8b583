import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test, vi } from 'vitest';
import { inspectFile } from '../../../analysis/intake/inspect-file';
import { MAX_UPLOAD_BYTES } from '../../../db/files/policy';
import { attachment, reading } from '../../../db/schema/index';
import { makeMember, makePerson } from '../../helpers/factories';
import { golden, sha256 } from '../../ws-server/projector/world';
import { UploadWorld } from './upload-world';

/** A file's way into an entry, and every wrong turn. Only the cookie is replaced. */
const session = vi.hoisted(() => ({ loginId: null as string | null }));
vi.mock('server-only', () => ({}));
vi.mock('next-auth', () => ({ getServerSession: async () => (session.loginId ? session : null) }));

let world: UploadWorld;
beforeAll(async () => {
  // The SDK's server half talks much of its own accord.
  for (const level of ['log', 'warn', 'error'] as const)
    vi.spyOn(console, level).mockImplementation(() => undefined);
  world = await UploadWorld.create(session);
  world.people.guest = await makePerson(world.db, { role: 'guest' });
  await makeMember(world.db, world.world.notebookId, world.people.guest, 'reader');
});
afterAll(() => world.end());

const ask = (name: string, size: number, more: { origin?: string } = {}) => world.ask([{ name, size }], more);
const upload = async (name: string, bytes: Uint8Array) => (await world.upload(name, bytes)).attachmentId;
const makeReading = (who: string, id: string, spec: unknown) =>
  world.call(import('../../../app/api/attachments/[id]/readings/route'), who, id, { spec });

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
    world.as(who);
    const { status: answered, body } = await ask('tracks.csv', 100);
    expect(answered).toBe(status);
    if (status === 200) expect(body[0]!.url).toContain(`:${world.fake.port}/`);
    else expect(body.message?.length).toBeGreaterThan(15);
  });

  test('a page of another origin may not, whoever is signed in', async () => {
    world.as('editor');
    expect((await ask('tracks.csv', 100, { origin: 'http://elsewhere.example' })).status).toBe(403);
  });

  test('a file over the limit is refused before a byte is sent, with its size and the remedy', async () => {
    world.as('editor');
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
    expect(row).toMatchObject({
      entryId: world.entryId,
      name: 'short.csv',
      bytes: bytes.length,
      sha256: sha256(bytes),
    });
    expect(row!.personId).toBe(world.people.editor!.personId);
  });

  test('a name is data: paths, control and direction characters are taken out', async () => {
    const id = await upload('../../etc/\u202egpj.exe\u0000.csv', golden('g14_short.csv'));
    const [row] = await world.db.select().from(attachment).where(eq(attachment.id, id));
    expect(row!.name).toBe('....etcgpj.exe.csv');
  });

  test('an upload that broke off goes on where it stopped', async () => {
    world.as('editor');
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
    const wrong = await world.send(url, bytes, 10_000);
    expect(wrong.status).toBe(416);
    const rest = await world.send(url, bytes, 20_000);
    expect(rest.serverData).toMatchObject({ bytes: bytes.length, sha256: sha256(bytes) });
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
    world.as('editor');
    const bytes = golden('g14_short.csv');
    const { body } = await ask('short.csv', bytes.length);
    const changed = change(body[0]!.url);
    expect(changed).not.toBe(body[0]!.url);
    expect(await world.send(changed, bytes)).toMatchObject({ status: 403 });
  });

  test('more bytes than were announced are thrown away', async () => {
    world.as('editor');
    const { body } = await ask('short.csv', 50);
    expect(await world.send(body[0]!.url, golden('g14_short.csv'))).toMatchObject({ status: 400 });
  });

  test('a call without the key, an address that is not a key', async () => {
    const service = `http://127.0.0.1:${world.fake.port}`;
    expect((await fetch(`${service}/v6/deleteFiles`, { method: 'POST', body: '{}' })).status).toBe(401);
    expect((await fetch(`${service}/f/..%2f..%2fetc%2fpasswd`)).status).toBeGreaterThanOrEqual(400);
  });

  test('a completion that nobody signed makes no attachment', async () => {
    const before = (await world.db.select().from(attachment)).length;
    const response = await fetch(`${world.origin}/api/uploadthing?slug=trajectory`, {
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
        origin: world.origin,
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
    const response = await world.download(who, id);
    expect(response.status).toBe(status);
    if (status === 200) expect(Buffer.from(await response.arrayBuffer()).equals(bytes)).toBe(true);
  });

  test('whatever it contains, a browser only saves it', async () => {
    const id = await upload('page "ä".html', Buffer.from('<script>alert(1)</script>'));
    const { headers } = await world.download('reader', id);
    expect(headers.get('Content-Type')).toBe('application/octet-stream');
    expect(headers.get('Content-Disposition')).toMatch(
      /^attachment; filename="page ___\.html"; filename\*=UTF-8''page%20%22%C3%A4%22\.html$/,
    );
    expect(headers.get('X-Content-Type-Options')).toBe('nosniff');
    expect(headers.get('Content-Security-Policy')).toContain('sandbox');
    expect(headers.get('Cache-Control')).toContain('no-store');
  });

  test('an id that is none, or nobody’s, is not there', async () => {
    expect((await world.download('author', 'x')).status).toBe(404);
    expect((await world.download('author', crypto.randomUUID())).status).toBe(404);
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
