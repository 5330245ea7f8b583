import { mkdtempSync, rmSync } from 'node:fs';
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { NextRequest } from 'next/server';
import type { Actor } from '../../../db/policies/may';
import { AnalysisWorker } from '../../../db/worker/analysis-worker';
import { newAnalysisThread } from '../../../db/worker/new-thread';
import { makeMember, makePerson } from '../../helpers/factories';
import { World } from '../../ws-server/projector/world';
import { RunningFake } from '../fakes/running-fake';

export interface Session {
  loginId: string | null;
}
export interface SentFile {
  readonly name: string;
  readonly size: unknown;
  readonly type?: string;
}
export interface Uploaded {
  readonly attachmentId: string;
  readonly name: string;
  readonly bytes: number;
  readonly sha256: string;
}
type Handler = (request: NextRequest, context: { params: Promise<{ id: string }> }) => Promise<Response>;

/**
 * The product's own route handlers behind a real HTTP server, with the real upload SDK, and the local file service as a
 * process. The test file itself replaces the cookie: what it puts into `session` is who asks.
 */
export class UploadWorld {
  readonly people: Record<string, Actor | null> = { nobody: null };
  origin = '';
  entryId = '';

  private constructor(
    readonly world: World,
    readonly fake: RunningFake,
    readonly folder: string,
    private readonly session: Session,
    private readonly product: Server,
  ) {}

  static async create(session: Session): Promise<UploadWorld> {
    const world = await World.create();
    const folder = mkdtempSync(path.join(tmpdir(), 'motebook-uploads-'));
    const fake = await RunningFake.start(path.join(folder, 'files'));
    const product = createServer();
    await new Promise<void>((resolve) => product.listen(0, '127.0.0.1', resolve));
    const one = new UploadWorld(world, fake, folder, session, product);
    await one.prepare();
    return one;
  }

  get db() {
    return this.world.db;
  }

  /** Where this server keeps verified copies. */
  get cacheFolder(): string {
    return path.join(this.folder, 'cache');
  }

  private async prepare(): Promise<void> {
    const { world } = this;
    this.origin = `http://127.0.0.1:${(this.product.address() as AddressInfo).port}`;
    Object.assign(process.env, {
      MOTEBOOK_DATABASE_APP: world.database.urls.motebook_app,
      MOTEBOOK_WS_URL: 'ws://127.0.0.1:4311',
      MOTEBOOK_FILES_ORIGIN: this.fake.origin,
      MOTEBOOK_CACHE: this.cacheFolder,
      NEXTAUTH_URL: this.origin,
      NEXTAUTH_SECRET: 'only for this test, 32 characters',
      ...this.fake.environment,
    });
    // The web process makes its thread from the bundle; here the sources are run as they are.
    globalThis.motebookAnalysisWorker = new AnalysisWorker({ create: () => newAnalysisThread() });
    const uploads = await import('../../../app/api/uploadthing/route');
    this.product.on('request', (request, response) => void answer(request, response));
    const answer = async (request: IncomingMessage, response: ServerResponse) => {
      const body: Buffer[] = [];
      for await (const chunk of request) body.push(chunk as Buffer);
      const given = await uploads.POST(
        new NextRequest(`${this.origin}${request.url}`, {
          method: 'POST',
          body: Buffer.concat(body),
          headers: request.headers as Record<string, string>,
        }),
      );
      response
        .writeHead(given.status, Object.fromEntries(given.headers))
        .end(Buffer.from(await given.arrayBuffer()));
    };
    this.entryId = await world.newEntry();
    this.people.author = world.author;
    for (const role of ['editor', 'reader', 'witness'] as const) {
      const person = await makePerson(world.db);
      await makeMember(world.db, world.notebookId, person, role);
      this.people[role] = person;
    }
    this.people.outsider = await makePerson(world.db, { role: 'pi', admin: true });
  }

  async end(): Promise<void> {
    await globalThis.motebookAnalysisWorker?.stop();
    this.product.closeAllConnections();
    await new Promise((resolve) => this.product.close(resolve));
    await this.fake.end('SIGKILL');
    await globalThis.motebookDatabase?.$client.end();
    await this.world.end();
    rmSync(this.folder, { recursive: true, force: true });
  }

  as(name: string): void {
    this.session.loginId = this.people[name]?.loginId ?? null;
  }

  /** Asks for a place to put files, as the browser's half of the SDK does. */
  async ask(files: readonly SentFile[], more: { entry?: unknown; slug?: string; origin?: string } = {}) {
    const response = await fetch(
      `${this.origin}/api/uploadthing?actionType=upload&slug=${more.slug ?? 'trajectory'}`,
      {
        method: 'POST',
        headers: {
          'Content-Type': 'application/json',
          'x-uploadthing-package': 'test',
          'x-uploadthing-version': '7.7.4',
          Origin: more.origin ?? this.origin,
        },
        body: JSON.stringify({
          files: files.map((file) => ({ type: 'text/csv', lastModified: 0, ...file })),
          input: { entryId: more.entry ?? this.entryId },
        }),
      },
    );
    const body = (await response.json()) as { url: string; key: string }[] & { message?: string };
    return { status: response.status, body };
  }

  /** Sends bytes to the place that was given, from some byte on. */
  async send(url: string, bytes: Uint8Array, from = 0) {
    const form = new FormData();
    form.append('file', new Blob([bytes.slice(from) as BlobPart]), 'file');
    const response = await fetch(url, { method: 'PUT', body: form, headers: { Range: `bytes=${from}-` } });
    const body = (await response.json()) as { serverData?: Uploaded; error?: string };
    return { status: response.status, ...body };
  }

  /** A whole upload by the editor. */
  async upload(name: string, bytes: Uint8Array, type = 'text/csv'): Promise<Uploaded> {
    this.as('editor');
    const { body } = await this.ask([{ name, size: bytes.length, type }]);
    const sent = await this.send(body[0]!.url, bytes);
    if (!sent.serverData) throw new Error(JSON.stringify(sent));
    return sent.serverData;
  }

  /** Calls a route handler of the product directly: GET without a body, else POST. */
  async call(
    module: Promise<Record<string, unknown>>,
    who: string,
    id: string,
    body?: unknown,
    headers: Record<string, string> = {},
  ): Promise<Response> {
    this.as(who);
    const method = body === undefined ? 'GET' : 'POST';
    const handler = (await module)[method] as Handler;
    const request = new NextRequest(`${this.origin}/x`, {
      method,
      headers: { Origin: this.origin, 'Content-Type': 'application/json', ...headers },
      ...(body === undefined ? {} : { body: typeof body === 'string' ? body : JSON.stringify(body) }),
    });
    return handler(request, { params: Promise.resolve({ id }) });
  }

  download(who: string, id: string): Promise<Response> {
    return this.call(import('../../../app/api/attachments/[id]/route'), who, id);
  }
}
