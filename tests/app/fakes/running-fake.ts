import { spawn, type ChildProcess } from 'node:child_process';
import { createHmac, randomBytes } from 'node:crypto';
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import path from 'node:path';
import { freePort } from '../../helpers/global-cluster';

export const API_KEY = 'sk_live_only_for_this_test';
export const APP_ID = 'testapp';

/** As the hosted service documents it: HMAC-SHA256 of the text with the API key, hexadecimal; written without our code. */
export const hmac = (text: string, key = API_KEY) =>
  `hmac-sha256=${createHmac('sha256', key).update(text).digest('hex')}`;

/** The local file service as the start command runs it: a process of its own. */
export class RunningFake {
  private child: ChildProcess | null = null;
  log = '';

  private constructor(
    readonly port: number,
    readonly folder: string,
  ) {}

  static async start(folder: string): Promise<RunningFake> {
    const fake = new RunningFake(await freePort(), folder);
    await fake.begin();
    return fake;
  }

  get origin(): string {
    return `http://127.0.0.1:${this.port}`;
  }

  get pid(): number {
    return this.child?.pid ?? 0;
  }

  async begin(): Promise<void> {
    const child = spawn(process.execPath, ['--import', 'tsx', 'app/_server/fakes/file-service-main.ts'], {
      cwd: path.resolve(import.meta.dirname, '../../..'),
      env: {
        PATH: process.env.PATH ?? '',
        MOTEBOOK_FILES_PORT: String(this.port),
        MOTEBOOK_FILES_FOLDER: this.folder,
        ...this.environment,
      } as unknown as NodeJS.ProcessEnv,
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    this.child = child;
    await new Promise<void>((resolve, reject) => {
      for (const stream of [child.stdout, child.stderr]) {
        stream.setEncoding('utf8').on('data', (text: string) => {
          this.log += text;
          if (text.includes('listens')) resolve();
        });
      }
      child.once('exit', (code) =>
        reject(new Error(`the file service ended with code ${code}: ${this.log}`)),
      );
    });
  }

  /** @returns the exit code; null after a signal that it did not handle. */
  async end(signal: NodeJS.Signals): Promise<number | null> {
    const { child } = this;
    this.child = null;
    if (!child || child.exitCode !== null || child.signalCode !== null) return child?.exitCode ?? null;
    const code = new Promise<number | null>((resolve) => child.once('exit', resolve));
    child.kill(signal);
    return code;
  }

  /** A presigned address for an upload, made as the SDK makes it: values encoded twice, the signature over all before it. */
  uploadUrl(
    key: string,
    size: number,
    more: { expires?: number; name?: string; signer?: string } = {},
  ): string {
    const query = new URLSearchParams({
      expires: String(more.expires ?? Date.now() + 60_000),
      'x-ut-identifier': encodeURIComponent(APP_ID),
      'x-ut-file-name': encodeURIComponent(more.name ?? 'tracks.csv'),
      'x-ut-file-size': String(size),
      'x-ut-file-type': encodeURIComponent('text/csv'),
      'x-ut-slug': 'trajectory',
    });
    return this.signed(`${this.origin}/${key}?${query.toString()}`, more.signer);
  }

  downloadUrl(key: string, expires = Date.now() + 60_000): string {
    return this.signed(`${this.origin}/f/${key}?expires=${expires}`);
  }

  signed(url: string, signer = API_KEY): string {
    return `${url}&signature=${encodeURIComponent(hmac(url, signer))}`;
  }

  /** A call of the product's server. */
  async call(name: string, body: unknown, key = API_KEY): Promise<{ status: number; body: unknown }> {
    const response = await fetch(`${this.origin}${name}`, {
      method: 'POST',
      headers: {
        'Content-Type': 'application/json',
        ...(key === '' ? {} : { 'x-uploadthing-api-key': key }),
      },
      body: JSON.stringify(body),
    });
    return { status: response.status, body: await response.json() };
  }

  /** Keeps a file of which no product is told. @returns its key. */
  async store(bytes: Uint8Array): Promise<string> {
    const key = randomBytes(24).toString('hex');
    const form = new FormData();
    form.append('file', new Blob([bytes as BlobPart]), 'file');
    const response = await fetch(this.uploadUrl(key, bytes.length), { method: 'PUT', body: form });
    if (!response.ok) throw new Error(await response.text());
    return key;
  }

  /** What the SDK needs to find this service. */
  get environment(): Record<string, string> {
    const token = { apiKey: API_KEY, appId: APP_ID, regions: ['local'], ingestHost: 'localhost' };
    return {
      UPLOADTHING_TOKEN: Buffer.from(JSON.stringify(token)).toString('base64'),
      UPLOADTHING_INGEST_URL: this.origin,
      UPLOADTHING_API_URL: this.origin,
      UPLOADTHING_UFS_HOST: `localhost:${this.port}`,
      UPLOADTHING_UFS_APP_ID_LOCATION: 'path',
    };
  }

  /** What the SDK registers before it hands an address to the browser. */
  register(key: string, product: ProductInSmall): Promise<unknown> {
    return this.call('/route-metadata', {
      fileKeys: [key],
      metadata: { ticketId: `ticket of ${key}` },
      isDev: false,
      callbackUrl: `${product.origin}/api/uploadthing`,
      callbackSlug: 'trajectory',
      awaitServerData: true,
    });
  }
}

export interface Told {
  readonly url: string;
  readonly hook: string | undefined;
  readonly signature: string | undefined;
  readonly body: string;
}

/** The side of the product that is called back: notes what it is told, and confirms it as the SDK would. */
export class ProductInSmall {
  readonly told: Told[] = [];
  /** What it does with a completion; by default it confirms. */
  answer: 'confirms' | 'reports a fault' | 'refuses' = 'confirms';
  private readonly server: Server;

  private constructor(private readonly fake: () => RunningFake) {
    this.server = createServer((request, response) => void this.take(request, response));
  }

  private async take(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const chunks: Buffer[] = [];
    for await (const chunk of request) chunks.push(chunk as Buffer);
    const body = Buffer.concat(chunks).toString('utf8');
    const { headers } = request;
    this.told.push({
      url: request.url ?? '',
      hook: headers['uploadthing-hook'] as string | undefined,
      signature: headers['x-uploadthing-signature'] as string | undefined,
      body,
    });
    if (this.answer === 'refuses') return void response.writeHead(400).end('{}');
    const { file } = JSON.parse(body) as { file: { key: string } };
    const said =
      this.answer === 'confirms' ? { callbackData: { kept: file.key } } : { error: 'it could not be kept' };
    await this.fake().call('/callback-result', { fileKey: file.key, ...said });
    response.writeHead(200).end('{}');
  }

  static async start(fake: () => RunningFake): Promise<ProductInSmall> {
    const product = new ProductInSmall(fake);
    await product.listen(0);
    return product;
  }

  private port = 0;
  get origin(): string {
    return `http://127.0.0.1:${this.port}`;
  }

  async listen(port = this.port): Promise<void> {
    await new Promise<void>((resolve) => this.server.listen(port, '127.0.0.1', resolve));
    this.port = (this.server.address() as AddressInfo).port;
  }

  async close(): Promise<void> {
    this.server.closeAllConnections();
    await new Promise((resolve) => this.server.close(resolve));
  }
}
