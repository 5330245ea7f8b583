import { createHash, randomBytes, randomUUID } from 'node:crypto';
import { readdirSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { count, eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, test, vi } from 'vitest';
import { startUpload } from '../../../db/commands/file/start-upload';
import { ERRORS } from '../../../db/errors';
import { MAX_UPLOAD_BYTES } from '../../../db/files/policy';
import type { Actor } from '../../../db/policies/may';
import { attachment, uploadTicket } from '../../../db/schema/index';
import { hmac } from '../fakes/running-fake';
import { UploadWorld } from './upload-world';

/** What the product believes of an upload: nothing that a browser says, and of the service only what it has signed. */
const session = vi.hoisted(() => ({ loginId: null as string | null }));
vi.mock('server-only', () => ({}));
vi.mock('next-auth', () => ({ getServerSession: async () => (session.loginId ? session : null) }));

let world: UploadWorld;
const said: string[] = [];
beforeAll(async () => {
  for (const level of ['log', 'info', 'warn', 'error', 'debug'] as const) {
    vi.spyOn(console, level).mockImplementation(
      (...words: unknown[]) => void said.push(words.map(String).join(' ')),
    );
  }
  world = await UploadWorld.create(session);
});
afterAll(() => world.end());
beforeEach(() => {
  said.length = 0;
});

const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');
const attachments = async () => (await world.db.select({ n: count() }).from(attachment))[0]!.n;
const tickets = async () => (await world.db.select({ n: count() }).from(uploadTicket))[0]!.n;
const rowOf = async (id: string) =>
  (await world.db.select().from(attachment).where(eq(attachment.id, id)))[0]!;
const byKey = (key: string) => world.db.select().from(attachment).where(eq(attachment.storageKey, key));

const ticketOf = async (actor: Actor) =>
  (await startUpload(world.db, actor, { entryId: world.entryId, name: 'said.csv', bytes: 3 })).ticketId;

/** A completion as the service tells it; every value of `file` is somebody's word. */
function completion(ticketId: string, key: string, file: Record<string, unknown> = {}): string {
  const url = `${world.fake.origin}/f/${key}`;
  return JSON.stringify({
    status: 'uploaded',
    metadata: { ticketId },
    origin: world.fake.origin,
    file: {
      name: 'said.csv',
      size: 3,
      type: 'text/csv',
      customId: null,
      key,
      url,
      appUrl: url,
      ufsUrl: url,
      fileHash: '0'.repeat(32),
      ...file,
    },
  });
}

async function callBack(body: string, signature: string | null, more: Record<string, string> = {}) {
  const response = await fetch(`${world.origin}/api/uploadthing?slug=trajectory`, {
    method: 'POST',
    headers: {
      'Content-Type': 'application/json',
      'uploadthing-hook': 'callback',
      'x-uploadthing-package': 'test',
      'x-uploadthing-version': '7.7.4',
      ...(signature === null ? {} : { 'x-uploadthing-signature': signature }),
      ...more,
    },
    body,
  });
  await response.arrayBuffer();
  return response.status;
}

describe('a completion (rules U6, S45)', () => {
  test('that is signed makes an attachment of what is really stored, whatever it says', async () => {
    const bytes = randomBytes(5000);
    const key = await world.fake.store(bytes);
    const body = completion(await ticketOf(world.people.editor!), key, {
      name: 'x.html',
      size: 1,
      type: 'text/html',
    });
    expect(await callBack(body, hmac(body))).toBe(200);
    expect(await byKey(key)).toMatchObject([
      { name: 'said.csv', bytes: 5000, sha256: sha256(bytes), mediaType: 'application/octet-stream' },
    ]);
    // Told once more, nothing more comes of it.
    const before = await attachments();
    expect(await callBack(body, hmac(body))).toBe(200);
    expect(await attachments()).toBe(before);
  });

  test('that is not signed, or not by the service, or not this one, makes none, whoever is signed in', async () => {
    const key = await world.fake.store(randomBytes(100));
    const body = completion(await ticketOf(world.people.editor!), key);
    world.as('editor');
    for (const signature of [
      null,
      '',
      'hmac-sha256=',
      hmac(body).replace('hmac-sha256=', ''),
      hmac(body, 'sk_live_another'),
      hmac(`${body} `),
      `${hmac(body).slice(0, -1)}${hmac(body).endsWith('0') ? '1' : '0'}`,
    ]) {
      expect([signature, await callBack(body, signature)]).toEqual([signature, 400]);
    }
    // Signed, and then changed on the way.
    expect(await callBack(body.replace(key, await world.fake.store(randomBytes(5))), hmac(body))).toBe(400);
    expect(await byKey(key)).toEqual([]);
  });

  test('for an upload that nobody started, or that is finished, makes none', async () => {
    const key = await world.fake.store(randomBytes(100));
    const stranger = completion(randomUUID(), key);
    await callBack(stranger, hmac(stranger));
    const { attachmentId } = await world.upload('one.csv', randomBytes(50));
    const [used] = await world.db
      .select()
      .from(uploadTicket)
      .where(sql`finished_at IS NOT NULL AND name = 'one.csv'`);
    const again = completion(used!.id, key);
    await callBack(again, hmac(again));
    expect(await byKey(key)).toEqual([]);
    expect(await rowOf(attachmentId)).toMatchObject({ name: 'one.csv', bytes: 50 });
    expect(said.join('\n')).toContain('upload callback');
  });

  test('of a file that the service does not have makes none, and can be told again', async () => {
    const ticketId = await ticketOf(world.people.editor!);
    const missing = completion(ticketId, randomBytes(24).toString('hex'));
    const before = await attachments();
    await callBack(missing, hmac(missing));
    expect(await attachments()).toBe(before);
    const key = await world.fake.store(randomBytes(100));
    const later = completion(ticketId, key);
    await callBack(later, hmac(later));
    expect(await byKey(key)).toHaveLength(1);
  });

  test('of a file over the limit makes none, whatever size it says (S38)', async () => {
    const key = await world.fake.store(Buffer.alloc(MAX_UPLOAD_BYTES + 1));
    const body = completion(await ticketOf(world.people.editor!), key, { size: 3 });
    await callBack(body, hmac(body));
    expect(await byKey(key)).toEqual([]);
    expect(said.join('\n')).toContain('too-big');
  });

  test('by whom the right was taken meanwhile makes none, and the browser is told why', async () => {
    world.as('editor');
    const bytes = randomBytes(100);
    const { body } = await world.ask([{ name: 'late.csv', size: 100 }]);
    const setRole = (role: string) =>
      world.db.execute(sql`UPDATE notebook_member SET role = ${role}::member_role
        WHERE person_id = ${world.people.editor!.personId}`);
    await setRole('reader');
    const sent = await world.send(body[0]!.url, bytes);
    await setRole('editor');
    expect(sent.serverData).toEqual({ refused: ERRORS.forbidden.sentence });
    expect(await byKey(body[0]!.key)).toEqual([]);
  });
});

describe('what a browser says', () => {
  test.each([
    ['text/html', 'page.html', '<script>alert(1)</script>'],
    ['image/svg+xml', 'picture.svg', '<svg xmlns="http://www.w3.org/2000/svg" onload="alert(1)"/>'],
    ['application/pdf', 'tracks.csv', 'track,frame,x\n1,0,0\n'],
    ['', 'no type', 'x'],
  ])('the type %j decides nothing: the file is for saving only', async (type, name, text) => {
    const { attachmentId } = await world.upload(name, Buffer.from(text), type);
    expect((await rowOf(attachmentId)).mediaType).toBe('application/octet-stream');
    const { headers } = await world.download('reader', attachmentId);
    expect(headers.get('Content-Type')).toBe('application/octet-stream');
    expect(headers.get('Content-Disposition')).toMatch(/^attachment; /);
    expect(headers.get('X-Content-Type-Options')).toBe('nosniff');
    expect(headers.get('Content-Security-Policy')).toBe("sandbox; default-src 'none'");
    expect(headers.get('Cross-Origin-Resource-Policy')).toBe('same-origin');
    expect(headers.get('Cache-Control')).toBe('private, no-store');
  });

  test.each([
    ['two\r\nSet-Cookie: a=b.csv', 'twoSet-Cookie: a=b.csv'],
    ['\u061ctracks\u2067vsc.exe', 'tracksvsc.exe'],
    ['..\\..\\boot.ini', '....boot.ini'],
    [`${'long '.repeat(80)}.csv`, `${'long '.repeat(40).slice(0, 196)}.csv`],
    ['\u0000', 'file'],
  ])('the name %j is kept as %j', async (given, kept) => {
    const { attachmentId, name } = await world.upload(given, Buffer.from('x'));
    expect(name).toBe(kept);
    const header = (await world.download('reader', attachmentId)).headers.get('Content-Disposition')!;
    expect(decodeURIComponent(/filename\*=UTF-8''(.*)$/.exec(header)![1]!)).toBe(kept);
  });

  test('the same bytes twice are two files, each as it was named, with one hash', async () => {
    const bytes = randomBytes(1000);
    const [one, two] = [await world.upload('first.csv', bytes), await world.upload('second.csv', bytes)];
    expect(two.attachmentId).not.toBe(one.attachmentId);
    expect([one.sha256, two.sha256]).toEqual([sha256(bytes), sha256(bytes)]);
    for (const { attachmentId } of [one, two]) {
      const got = await world.download('reader', attachmentId);
      expect(sha256(Buffer.from(await got.arrayBuffer()))).toBe(sha256(bytes));
    }
    expect([one.name, two.name]).toEqual(['first.csv', 'second.csv']);
  });

  test('a request that is not one file of a known size for one entry starts nothing', async () => {
    world.as('editor');
    const before = await tickets();
    const file = { name: 'a.csv', size: 5 };
    const answers = [
      await world.ask([]),
      await world.ask([file, { ...file, name: 'b.csv' }]),
      await world.ask([file], { entry: 'no-id' }),
      await world.ask([file], { entry: 7 }),
      await world.ask([file], { entry: randomUUID() }),
      await world.ask([file], { slug: 'avatar' }),
      await world.ask([{ ...file, size: '5' }]),
      await world.ask([{ ...file, size: null }]),
      await world.ask([{ ...file, size: -1 }]),
      await world.ask([{ ...file, size: 0.5 }]),
      await world.ask([{ ...file, size: 1e300 }]),
      await world.ask([{ ...file, size: MAX_UPLOAD_BYTES + 1 }]),
    ];
    expect(answers.map(({ status }) => status)).toEqual([
      400, 400, 400, 400, 404, 404, 400, 400, 400, 400, 413, 413,
    ]);
    expect(await tickets()).toBe(before);
    expect((await world.ask([{ ...file, size: MAX_UPLOAD_BYTES }])).status).toBe(200);
  });

  test('no signed address and no key is written into the log', async () => {
    const { attachmentId } = await world.upload('quiet.csv', Buffer.from('x'));
    await world.download('reader', attachmentId);
    expect(said.join('\n')).not.toMatch(/signature=|sk_live/);
    expect(world.fake.log).not.toMatch(/signature=|sk_live/);
  });
});

describe('a download', () => {
  const forget = () => rmSync(world.cacheFolder, { recursive: true, force: true });

  test('ends with the right to it', async () => {
    const { attachmentId } = await world.upload('mine.csv', Buffer.from('x'));
    expect((await world.download('reader', attachmentId)).status).toBe(200);
    const { personId } = world.people.reader!;
    const role = await world.db.execute(
      sql`DELETE FROM notebook_member WHERE person_id = ${personId} RETURNING role`,
    );
    expect(role.rowCount).toBe(1);
    const refused = await world.download('reader', attachmentId);
    await world.db.execute(sql`INSERT INTO notebook_member (notebook_id, person_id, role)
      VALUES (${world.world.notebookId}, ${personId}, 'reader')`);
    const unknown = await world.download('reader', randomUUID());
    // Whether the file exists must not show.
    expect([refused.status, await refused.json()]).toEqual([unknown.status, await unknown.json()]);
  });

  test('of bytes that were changed in the store is refused', async () => {
    const bytes = randomBytes(3000);
    const { attachmentId } = await world.upload('kept.csv', bytes);
    const { storageKey } = await rowOf(attachmentId);
    bytes[1500]! ^= 1;
    writeFileSync(path.join(world.fake.folder, `${storageKey}.bin`), bytes);
    forget();
    const response = await world.download('reader', attachmentId);
    expect(response.status).toBe(422);
    expect(await response.json()).toMatchObject({ code: 'unreadable', sentence: /kept\.csv/ as unknown });
    expect(readdirSync(world.folder)).not.toContain('cache');
  });

  test('while the file service is away says so, or comes from the copy', async () => {
    const bytes = randomBytes(100);
    const { attachmentId } = await world.upload('away.csv', bytes);
    await world.download('reader', attachmentId);
    await world.fake.end('SIGTERM');
    try {
      expect((await world.download('reader', attachmentId)).status).toBe(200);
      forget();
      const response = await world.download('reader', attachmentId);
      expect(response.status).toBe(503);
      expect(await response.json()).toMatchObject({ code: 'storage-down' });
      // Rights are asked first: the state of the store is no business of strangers.
      expect((await world.download('outsider', attachmentId)).status).toBe(404);
      expect((await world.download('nobody', attachmentId)).status).toBe(401);
    } finally {
      await world.fake.begin();
    }
  });
});
