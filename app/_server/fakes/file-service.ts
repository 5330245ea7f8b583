import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { FileStore, type StoredFile } from './file-store';
import { Incoming } from './incoming';
import { addressFault, sign } from './signature';

/**
 * Local stand-in for the hosted file service that the upload SDK talks to: the same addresses, signatures and order of
 * calls, so that the product runs its real SDK. Checks and keeps what it is sent; an unknown call is an error.
 */
export interface FileServiceOptions {
  readonly port: number;
  readonly folder: string;
  readonly apiKey: string;
  readonly appId: string;
}

export interface RunningFileService {
  readonly port: number;
  stop(): Promise<void>;
}

/** A completion waits at most this long for the product to confirm. */
const CALLBACK_MS = 60_000;

export async function startFileService(options: FileServiceOptions): Promise<RunningFileService> {
  const service = new FileService(options);
  const server = createServer((request, response) => {
    service.answer(request, response).catch((error: unknown) => {
      console.error('file service:', error);
      if (!response.headersSent) json(response, 500, { error: 'the file service failed' });
      else response.destroy();
    });
  });
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(options.port, '127.0.0.1', resolve);
  });
  const { port } = server.address() as AddressInfo;
  return {
    port,
    stop: () =>
      new Promise((resolve) => {
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}

class FileService {
  private readonly store: FileStore;
  private readonly incoming = new Incoming();
  /** Completions under way: the same file may be asked for twice, but is completed once. */
  private readonly completing = new Map<string, Promise<unknown>>();
  private readonly results = new Map<string, (result: unknown) => void>();

  constructor(private readonly options: FileServiceOptions) {
    this.store = new FileStore(options.folder);
  }

  async answer(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const target = request.url ?? '/';
    allowBrowsers(response);
    if (!URL.canParse(target, 'http://localhost')) return json(response, 400, { error: 'not an address' });
    const { pathname } = new URL(target, 'http://localhost');
    if (request.method === 'OPTIONS') return void response.writeHead(204).end();
    if (request.method === 'POST') {
      if (request.headers['x-uploadthing-api-key'] !== this.options.apiKey)
        return json(response, 401, { error: 'wrong API key' });
      return this.post(pathname, await readJson(request), response);
    }
    const download = /^\/(?:a\/([^/]+)|f)\/([^/]+)$/.exec(pathname);
    if (request.method === 'GET' && download) return this.download(request, target, download[2]!, response);
    const key = pathname.slice(1);
    if (!FileStore.isKey(key))
      return json(response, 404, { error: `unknown address ${request.method} ${pathname}` });
    const fault = addressFault(`http://${request.headers.host}`, target, this.options.apiKey);
    if (fault) return json(response, 403, { error: fault });
    if (request.method === 'HEAD') {
      await this.incoming.breakOff(key);
      return void response.writeHead(200, { 'x-ut-range-start': String(this.store.stored(key)) }).end();
    }
    if (request.method === 'PUT') return this.put(request, target, key, response);
    json(response, 405, { error: `unknown call ${request.method} ${pathname}` });
  }

  private post(pathname: string, body: Record<string, unknown>, response: ServerResponse): void {
    if (pathname === '/route-metadata') {
      const keys = Array.isArray(body.fileKeys) ? body.fileKeys.map(String) : [];
      if (!keys.every((key) => FileStore.isKey(key))) return json(response, 400, { error: 'not a key' });
      for (const key of keys) {
        const before = this.store.find(key);
        const route = {
          metadata: body.metadata,
          callbackUrl: String(body.callbackUrl),
          callbackSlug: String(body.callbackSlug),
        };
        this.store.save({ ...(before ?? emptyFile(key)), route });
      }
      return json(response, 200, { ok: true });
    }
    if (pathname === '/callback-result') {
      const key = String(body.fileKey);
      this.results.get(key)?.('error' in body ? { error: body.error } : body.callbackData);
      return json(response, 200, { ok: true });
    }
    if (pathname === '/v6/deleteFiles') {
      const keys = (body.fileKeys ?? []) as string[];
      const deletedCount = keys.filter((key) => FileStore.isKey(key) && this.store.remove(key)).length;
      return json(response, 200, { success: true, deletedCount });
    }
    json(response, 404, { error: `unknown call POST ${pathname}` });
  }

  private async put(
    request: IncomingMessage,
    target: string,
    key: string,
    response: ServerResponse,
  ): Promise<void> {
    const query = new URL(target, 'http://localhost').searchParams;
    const read = (name: string) => (query.has(name) ? decodeURIComponent(query.get(name)!) : null);
    const size = read('x-ut-file-size');
    const boundary = /boundary="?([^";]+)"?/.exec(request.headers['content-type'] ?? '')?.[1];
    const start = Number(/^bytes=(\d+)-$/.exec(request.headers.range ?? 'bytes=0-')?.[1]);
    if (!boundary || size === null || !/^\d+$/.test(size))
      return json(response, 400, { error: 'not a multipart upload with a size' });
    const expected = Number(size);
    await this.incoming.breakOff(key);
    if (start !== this.store.stored(key)) {
      return json(response, 416, { error: `expected to go on at byte ${this.store.stored(key)}` });
    }
    if (start > 0 && start === expected) {
      // All of it is here: nothing that is sent once more can spoil it.
      request.resume();
    } else {
      const fault = await this.takeIn(request, key, boundary, expected - start);
      if (fault === 'gone') return void response.destroy();
      if (fault) return json(response, 400, { error: fault });
    }
    const known = this.store.find(key) ?? emptyFile(key);
    const file: StoredFile = {
      ...known,
      name: read('x-ut-file-name') ?? 'file',
      size: expected,
      type: read('x-ut-file-type') ?? 'application/octet-stream',
      customId: read('x-ut-custom-id'),
      slug: read('x-ut-slug'),
      uploadedAt: known.uploadedAt ?? Date.now(),
    };
    this.store.save(file);
    // The service's own address: where the product says that it has dealt with the file.
    const answer = await this.complete(file, `http://${request.headers.host}`);
    json(response, 'error' in (answer as object) ? 400 : 200, answer);
  }

  /** @returns null when the file is complete, else why not; 'gone' when the sender will come back and go on. */
  private async takeIn(
    request: IncomingMessage,
    key: string,
    boundary: string,
    missing: number,
  ): Promise<string | null> {
    const before = this.store.stored(key);
    const file = this.store.bytesPath(key);
    const arrival = await this.incoming.receive(request, key, { boundary, file, expected: missing });
    if (arrival === 'too-much') {
      this.store.removeBytes(key);
      return 'more bytes than announced';
    }
    if (this.store.stored(key) === before + missing) return null;
    return arrival === 'whole' ? 'fewer bytes than announced' : 'gone';
  }

  /** Calls the product back and waits for what it has to say; once a file. */
  private complete(file: StoredFile, origin: string): Promise<unknown> {
    if (file.answer) return Promise.resolve(file.answer);
    const running = this.completing.get(file.key);
    if (running) return running;
    const completion = this.callBack(file, origin).finally(() => this.completing.delete(file.key));
    this.completing.set(file.key, completion);
    return completion;
  }

  private async callBack(file: StoredFile, origin: string): Promise<unknown> {
    const fileHash = await this.store.md5(file.key);
    const url = `http://127.0.0.1/f/${file.key}`;
    const urls = { url, appUrl: url, ufsUrl: url, fileHash };
    if (!file.route) {
      const answer = { ...urls, serverData: null };
      this.store.save({ ...file, answer });
      return answer;
    }
    const { metadata, callbackUrl, callbackSlug } = file.route;
    const { name, size, type, customId, key } = file;
    const body = JSON.stringify({
      status: 'uploaded',
      metadata,
      origin,
      file: { name, size, type, customId, key, ...urls },
    });
    const said = new Promise<unknown>((resolve) => this.results.set(key, resolve));
    try {
      const back = await fetch(`${callbackUrl}?slug=${encodeURIComponent(callbackSlug)}`, {
        method: 'POST',
        body,
        headers: {
          'Content-Type': 'application/json',
          'uploadthing-hook': 'callback',
          'x-uploadthing-signature': sign(body, this.options.apiKey),
        },
        signal: AbortSignal.timeout(CALLBACK_MS),
      });
      if (!back.ok) return { error: `the product refused the file (${back.status})` };
      const serverData = await Promise.race([said, late()]);
      if (typeof serverData === 'object' && serverData !== null && 'error' in serverData) return serverData;
      const answer = { ...urls, serverData };
      this.store.save({ ...file, answer });
      return answer;
    } catch (error) {
      return { error: `the product could not be told of the file: ${(error as Error).message}` };
    } finally {
      this.results.delete(key);
    }
  }

  private download(request: IncomingMessage, target: string, key: string, response: ServerResponse): void {
    const fault = addressFault(`http://${request.headers.host}`, target, this.options.apiKey);
    if (fault) return json(response, 403, { error: fault });
    const file = FileStore.isKey(key) ? this.store.find(key) : null;
    if (!file?.uploadedAt) return json(response, 404, { error: 'no such file' });
    response.writeHead(200, { 'Content-Type': file.type, 'Content-Length': file.size });
    this.store.read(key).pipe(response);
  }
}

const emptyFile = (key: string): StoredFile => ({
  key,
  name: '',
  size: 0,
  type: '',
  customId: null,
  slug: null,
  route: null,
  answer: null,
  uploadedAt: null,
});

const late = () =>
  new Promise<unknown>((resolve) =>
    setTimeout(() => resolve({ error: 'the product did not confirm the file in time' }), 5_000),
  );

function allowBrowsers(response: ServerResponse): void {
  response.setHeader('Access-Control-Allow-Origin', '*');
  response.setHeader('Access-Control-Allow-Methods', 'HEAD, PUT, GET, OPTIONS');
  response.setHeader(
    'Access-Control-Allow-Headers',
    'range, x-uploadthing-version, b3, traceparent, content-type',
  );
  response.setHeader('Access-Control-Expose-Headers', 'x-ut-range-start');
}

function json(response: ServerResponse, status: number, body: unknown): void {
  response.writeHead(status, { 'Content-Type': 'application/json; charset=utf-8' }).end(JSON.stringify(body));
}

async function readJson(request: IncomingMessage): Promise<Record<string, unknown>> {
  const chunks: Buffer[] = [];
  let size = 0;
  for await (const chunk of request) {
    size += (chunk as Buffer).length;
    if (size > 1024 * 1024) throw new Error('request too large');
    chunks.push(chunk as Buffer);
  }
  return JSON.parse(Buffer.concat(chunks).toString('utf8')) as Record<string, unknown>;
}
