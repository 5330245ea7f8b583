import { randomBytes, createHash } from 'node:crypto';
import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { connect } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { UTApi } from 'uploadthing/server';
import { afterAll, beforeAll, beforeEach, describe, expect, test, vi } from 'vitest';
import { until } from '../../helpers/collab-clients';
import { APP_ID, hmac, ProductInSmall, RunningFake } from './running-fake';

/** The local stand-in of the file service as a process, called as the SDK and a browser call the hosted one. */
let folder: string;
let files: string;
let fake: RunningFake;
let product: ProductInSmall;

beforeAll(async () => {
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-fake-'));
  files = path.join(folder, 'files');
  fake = await RunningFake.start(files);
  product = await ProductInSmall.start(() => fake);
});
afterAll(async () => {
  await fake.end('SIGKILL');
  await product.close();
  rmSync(folder, { recursive: true, force: true });
});
beforeEach(() => {
  product.answer = 'confirms';
  product.told.length = 0;
});

const newKey = () => randomBytes(24).toString('hex');
const some = (size: number) => randomBytes(size);
const BOUNDARY = 'a-boundary';
const HEAD = `--${BOUNDARY}\r\nContent-Disposition: form-data; name="file"; filename="f"\r\n\r\n`;

/** A whole body, as a browser sends it. */
async function send(url: string, bytes: Uint8Array, from = 0, headers: Record<string, string> = {}) {
  const form = new FormData();
  form.append('file', new Blob([bytes as BlobPart]), 'file');
  const response = await fetch(url, {
    method: 'PUT',
    body: form,
    headers: { Range: `bytes=${from}-`, ...headers },
  });
  return { status: response.status, body: (await response.json()) as Record<string, unknown> };
}

/** A line over which a body comes in pieces, and that may be cut. */
function slowly(url: string, announced: number, from = 0) {
  const { pathname, search, port } = new URL(url);
  const socket = connect(Number(port), '127.0.0.1').on('error', () => undefined);
  socket.write(
    `PUT ${pathname}${search} HTTP/1.1\r\nHost: 127.0.0.1:${port}\r\nRange: bytes=${from}-\r\nContent-Type: multipart/form-data; boundary=${BOUNDARY}\r\n` +
      `Content-Length: ${announced + HEAD.length + BOUNDARY.length + 8}\r\n\r\n${HEAD}`,
  );
  let ended = false;
  socket.on('close', () => (ended = true));
  return {
    write: (bytes: Uint8Array) => new Promise<void>((resolve) => socket.write(bytes, () => resolve())),
    cut: () => socket.destroy(),
    isEnded: () => ended,
  };
}
const arrived = async (url: string) =>
  Number((await fetch(url, { method: 'HEAD' })).headers.get('x-ut-range-start'));
const onDisk = (key: string) => {
  const file = path.join(files, `${key}.bin`);
  return existsSync(file) ? readFileSync(file) : null;
};

describe('who is let in', () => {
  test('it listens on loopback only', () => {
    // The kernel's own table of sockets (proc(5), /proc/net/tcp): address and port in hexadecimal, state 0A is LISTEN.
    const port = fake.port.toString(16).toUpperCase().padStart(4, '0');
    const listening = ['tcp', 'tcp6'].flatMap((table) =>
      readFileSync(`/proc/net/${table}`, 'utf8')
        .split('\n')
        .map((line) => line.trim().split(/\s+/))
        .filter((words) => words[1]?.endsWith(`:${port}`) && words[3] === '0A')
        .map((words) => words[1]),
    );
    expect(listening).toEqual([`0100007F:${port}`]);
  });

  test('nobody without a signed address, nobody without the key', async () => {
    const key = newKey();
    for (const method of ['GET', 'HEAD', 'PUT']) {
      const response = await fetch(`${fake.origin}/${key}`, { method });
      expect([method, response.status]).toEqual([method, 403]);
    }
    expect((await fetch(`${fake.origin}/f/${key}`)).status).toBe(403);
    expect((await fetch(`${fake.origin}/a/${APP_ID}/${key}`)).status).toBe(403);
    expect((await fetch(`${fake.origin}/`)).status).toBe(404);
    for (const name of ['/route-metadata', '/callback-result', '/v6/deleteFiles', '/v6/listFiles']) {
      for (const wrong of ['', 'sk_live_another']) {
        expect([name, (await fake.call(name, { fileKeys: [key] }, wrong)).status]).toEqual([name, 401]);
      }
    }
    expect((await fake.call('/v6/somethingElse', {})).status).toBe(404);
    expect(readdirSync(files).filter((name) => name.startsWith(key))).toEqual([]);
  });

  test.each([
    ['another key', (url: string) => url.replace(/\/[0-9a-f]{48}/, `/${newKey()}`)],
    ['another size', (url: string) => url.replace('file-size=100', 'file-size=101')],
    ['another name', (url: string) => url.replace('tracks.csv', 'other.csv')],
    ['a later end', (url: string) => url.replace(/expires=\d/, 'expires=9')],
    ['one parameter more', (url: string) => url.replace('&signature', '&x-ut-custom-id=1&signature')],
    ['one behind the signature', (url: string) => `${url}&x-ut-file-size=5000`],
    [
      'a second signature',
      (url: string) => `${url}&signature=${encodeURIComponent(hmac(url, 'sk_live_another'))}`,
    ],
    ['half a signature', (url: string) => url.slice(0, -10)],
    ['a signature that cannot be decoded', (url: string) => url.replace(/signature=.*$/, 'signature=%E0%A4')],
    ['no signature', (url: string) => url.replace(/&signature=.*$/, '')],
  ])('a signed address with %s is refused', async (_, change) => {
    const url = change(fake.uploadUrl(newKey(), 100));
    for (const method of ['HEAD', 'PUT']) expect((await fetch(url, { method })).status).toBe(403);
    expect((await send(url, some(100))).status).toBe(403);
  });

  test('an address that another key signed, that is for another host, or whose time is over', async () => {
    const key = newKey();
    const foreign = fake.uploadUrl(key, 100, { signer: 'sk_live_another' });
    expect(await send(foreign, some(100))).toEqual({ status: 403, body: { error: 'wrong signature' } });
    const host = fake.uploadUrl(key, 100).replace('127.0.0.1', 'localhost');
    expect((await fetch(host, { method: 'HEAD' })).status).toBe(403);
    const late = fake.uploadUrl(key, 100, { expires: Date.now() - 1 });
    expect(await send(late, some(100))).toEqual({ status: 403, body: { error: 'expired' } });
    const noTime = fake.signed(`${fake.origin}/${key}?x-ut-file-size=100`);
    expect((await send(noTime, some(100))).status).toBe(403);
    expect(onDisk(key)).toBeNull();
  });

  test('a key is a name of a file and nothing else, even when it is signed', async () => {
    const { length } = readdirSync(folder);
    for (const bad of [
      '..%2f..%2fescape-escape-escape',
      '%2e%2e%2fescape-escape-escape',
      'a.b',
      'short',
      '%00'.repeat(30),
    ]) {
      expect((await send(fake.uploadUrl(bad, 5), some(5))).status).toBe(404);
      expect((await fetch(fake.downloadUrl(bad))).status).toBe(404);
      const up = decodeURIComponent(bad);
      expect((await fake.register(up, product)) as object).toMatchObject({ status: 400 });
      expect(await fake.call('/v6/deleteFiles', { fileKeys: [up] })).toMatchObject({
        body: { deletedCount: 0 },
      });
    }
    expect(readdirSync(folder).length).toBe(length);
    expect(readdirSync(files).filter((name) => !/^[0-9a-f]{48}\.(bin|json)$/.test(name))).toEqual([]);
    // A client that sends the path as it is, without tidying it up first.
    const answer = await new Promise<string>((resolve) => {
      const socket = connect(fake.port, '127.0.0.1');
      socket.end('GET /../../../../etc/passwd HTTP/1.1\r\nHost: x\r\nConnection: close\r\n\r\n');
      let text = '';
      socket.setEncoding('utf8').on('data', (piece: string) => (text += piece));
      socket.on('close', () => resolve(text));
    });
    expect(answer).toMatch(/^HTTP\/1\.1 4/);
    expect(answer).not.toContain('root:');
  });

  test('a browser of another origin may ask first, and may read how far it came', async () => {
    const response = await fetch(fake.uploadUrl(newKey(), 5), { method: 'OPTIONS' });
    expect(response.status).toBe(204);
    const header = (name: string) => response.headers.get(`access-control-${name}`);
    expect(header('allow-methods')).toMatch(/HEAD.*PUT/);
    for (const name of ['range', 'content-type', 'b3', 'traceparent', 'x-uploadthing-version'])
      expect(header('allow-headers')).toContain(name);
    expect(header('expose-headers')).toContain('x-ut-range-start');
  });
});

describe('an upload', () => {
  test('whole: the same bytes, the product told once and with a signature, its answer passed on', async () => {
    const key = newKey();
    const bytes = some(300_000);
    await fake.register(key, product);
    const sent = await send(fake.uploadUrl(key, bytes.length, { name: 'µ tracks & more.csv' }), bytes);
    expect(sent).toMatchObject({ status: 200, body: { serverData: { kept: key } } });
    expect(onDisk(key)?.equals(bytes)).toBe(true);
    expect(product.told).toHaveLength(1);
    const [told] = product.told;
    expect(told).toMatchObject({ url: '/api/uploadthing?slug=trajectory', hook: 'callback' });
    expect(told!.signature).toBe(hmac(told!.body));
    expect(JSON.parse(told!.body)).toMatchObject({
      status: 'uploaded',
      metadata: { ticketId: `ticket of ${key}` },
      file: {
        key,
        name: 'µ tracks & more.csv',
        size: bytes.length,
        fileHash: createHash('md5').update(bytes).digest('hex'),
      },
    });
  });

  test('bytes that look like the end of a part are bytes', async () => {
    const key = newKey();
    const bytes = Buffer.concat([
      Buffer.from(`\r\n--${BOUNDARY}--\r\n`),
      some(50),
      Buffer.from('\r\n--\r\n\r\n'),
    ]);
    expect((await send(fake.uploadUrl(key, bytes.length), bytes)).status).toBe(200);
    expect(onDisk(key)?.equals(bytes)).toBe(true);
  });

  test('an empty file is a file', async () => {
    const key = newKey();
    await fake.register(key, product);
    expect((await send(fake.uploadUrl(key, 0), some(0))).status).toBe(200);
    expect(onDisk(key)?.length).toBe(0);
    expect(product.told).toHaveLength(1);
  });

  test('more bytes than announced: nothing is kept, and the right ones can still be sent', async () => {
    for (const registered of [true, false]) {
      const key = newKey();
      const bytes = some(1000);
      if (registered) await fake.register(key, product);
      const url = fake.uploadUrl(key, 400);
      expect(await send(url, bytes)).toEqual({ status: 400, body: { error: 'more bytes than announced' } });
      expect([onDisk(key), await arrived(url)]).toEqual([null, 0]);
      expect((await send(url, bytes.subarray(0, 400))).body.serverData).toEqual(
        registered ? { kept: key } : null,
      );
      expect(onDisk(key)?.equals(bytes.subarray(0, 400))).toBe(true);
    }
    expect(product.told).toHaveLength(1);
  });

  test('fewer bytes than announced: no piece of the form is taken for content', async () => {
    const key = newKey();
    const bytes = some(1000);
    await fake.register(key, product);
    const url = fake.uploadUrl(key, bytes.length);
    expect(await send(url, bytes.subarray(0, 600))).toMatchObject({ status: 400 });
    expect(await arrived(url)).toBe(600);
    expect(product.told).toEqual([]);
    expect((await send(url, bytes.subarray(600), 600)).status).toBe(200);
    expect(onDisk(key)?.equals(bytes)).toBe(true);
  });

  test('broken off twice, once by the death of the service: goes on from the byte it says, and from no other', async () => {
    const key = newKey();
    const bytes = some(500_000);
    await fake.register(key, product);
    const url = fake.uploadUrl(key, bytes.length);
    const line = slowly(url, bytes.length);
    await line.write(bytes.subarray(0, 100_000));
    await until('the first piece arrives', () => (onDisk(key)?.length ?? 0) >= 99_900);
    line.cut();
    const first = await arrived(url);
    expect(first).toBe(100_000);
    for (const wrong of [0, first - 1, first + 1, bytes.length]) {
      expect((await send(url, bytes.subarray(wrong), wrong)).status).toBe(416);
    }
    for (const range of ['bytes=-5', 'bytes=100000-200000', 'lines=1-', 'bytes=1e5-']) {
      expect([range, (await send(url, some(5), 0, { Range: range })).status]).toEqual([range, 416]);
    }
    expect(onDisk(key)?.equals(bytes.subarray(0, first))).toBe(true);

    const again = slowly(url, bytes.length - first, first);
    await again.write(bytes.subarray(first, 250_000));
    await until('some of the second piece arrives', () => onDisk(key)!.length > first);
    await fake.end('SIGKILL');
    await fake.begin();
    const second = await arrived(url);
    expect(second).toBeGreaterThan(first);
    expect(onDisk(key)?.equals(bytes.subarray(0, second))).toBe(true);
    const done = await send(url, bytes.subarray(second), second);
    expect(done).toMatchObject({ status: 200, body: { serverData: { kept: key } } });
    expect(onDisk(key)?.equals(bytes)).toBe(true);
  });

  test('who comes back while the old line still stands ends that line; the bytes of the two do not mix', async () => {
    const key = newKey();
    const bytes = some(200_000);
    await fake.register(key, product);
    const url = fake.uploadUrl(key, bytes.length);
    const old = slowly(url, bytes.length);
    await old.write(bytes.subarray(0, 70_000));
    await until('the first piece arrives', () => (onDisk(key)?.length ?? 0) >= 69_900);
    const from = await arrived(url);
    expect(from).toBe(70_000);
    await until('the old line is ended', old.isEnded);
    await old.write(some(1000)).catch(() => undefined);
    expect(await arrived(url)).toBe(from);
    expect((await send(url, bytes.subarray(from), from)).status).toBe(200);
    expect(onDisk(key)?.equals(bytes)).toBe(true);
    expect(product.told).toHaveLength(1);
  });

  test('asked again when all is there, it answers the same and tells the product nothing', async () => {
    const key = newKey();
    const bytes = some(1000);
    await fake.register(key, product);
    const url = fake.uploadUrl(key, bytes.length);
    const [one, two] = [await send(url, bytes), await send(url, some(0), bytes.length)];
    expect(two).toEqual(one);
    // Nor can the file be changed any more by whoever still has its address.
    expect(await send(url, some(77), bytes.length)).toEqual(one);
    expect((await send(url, some(1000))).status).toBe(416);
    expect(onDisk(key)?.equals(bytes)).toBe(true);
    expect(product.told).toHaveLength(1);
  });

  test('a product that refuses, reports a fault or is away makes the upload fail; later it can be told again', async () => {
    const key = newKey();
    const bytes = some(1000);
    await fake.register(key, product);
    const url = fake.uploadUrl(key, bytes.length);
    product.answer = 'refuses';
    expect(await send(url, bytes)).toMatchObject({ status: 400, body: { error: /refused/ } });
    product.answer = 'reports a fault';
    expect(await send(url, some(0), 1000)).toEqual({ status: 400, body: { error: 'it could not be kept' } });
    await product.close();
    expect(await send(url, some(0), 1000)).toMatchObject({
      status: 400,
      body: { error: /could not be told/ },
    });
    await product.listen();
    product.answer = 'confirms';
    expect(await send(url, some(0), 1000)).toMatchObject({
      status: 200,
      body: { serverData: { kept: key } },
    });
    expect(product.told).toHaveLength(3);
  });
});

describe('a stored file', () => {
  test('is given to signed addresses only, and not before all of it is there', async () => {
    const bytes = some(50_000);
    const key = await fake.store(bytes);
    const response = await fetch(fake.downloadUrl(key));
    expect(response.status).toBe(200);
    expect(Buffer.from(await response.arrayBuffer()).equals(bytes)).toBe(true);
    expect((await fetch(fake.downloadUrl(key, Date.now() - 1))).status).toBe(403);
    expect((await fetch(fake.downloadUrl(key).replace(key, newKey()))).status).toBe(403);
    // An address to send to is none to fetch from.
    expect((await fetch(fake.uploadUrl(key, 5))).status).toBe(405);

    const half = newKey();
    await fake.register(half, product);
    const line = slowly(fake.uploadUrl(half, 500), 500);
    await line.write(some(100));
    expect((await fetch(fake.downloadUrl(half))).status).toBe(404);
    line.cut();
  });

  test('the real SDK signs an address that works, and its delete removes the bytes', async () => {
    Object.assign(process.env, fake.environment);
    const api = new UTApi({ token: fake.environment.UPLOADTHING_TOKEN });
    // The SDK warns of old fields in answers.
    vi.spyOn(console, 'warn').mockImplementation(() => undefined);
    const bytes = some(5000);
    const key = await fake.store(bytes);
    const { ufsUrl } = await api.generateSignedURL(key, { expiresIn: '1 minute' });
    const response = await fetch(ufsUrl);
    expect(Buffer.from(await response.arrayBuffer()).equals(bytes)).toBe(true);
    expect(
      (await fetch(ufsUrl.replace('signature=hmac-sha256%3D', 'signature=hmac-sha256%3D0'))).status,
    ).toBe(403);
    expect(await api.deleteFiles([key, newKey()])).toEqual({ success: true, deletedCount: 1 });
    expect((await fetch(ufsUrl)).status).toBe(404);
    expect(readdirSync(files).filter((name) => name.startsWith(key))).toEqual([]);
    vi.restoreAllMocks();
  });
});

test('asked to end, it ends in order, with an upload under way', async () => {
  const url = fake.uploadUrl(newKey(), 1000);
  const line = slowly(url, 1000);
  await line.write(some(10));
  expect(await fake.end('SIGTERM')).toBe(0);
  await fake.begin();
});
