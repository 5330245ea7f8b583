import { spawn, type ChildProcess } from 'node:child_process';
import { mkdtemp, rm } from 'node:fs/promises';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';

const PROJECT = path.resolve(import.meta.dirname, '../..');

/** The whole product, started by the same command as a person's, with ports and a data folder of its own. */
export interface Stack {
  readonly url: string;
  readonly dataFolder: string;
  readonly environment: Readonly<Record<string, string>>;
  /** Everything the start command has printed so far. */
  output(): string;
  /** Ctrl-C, and waits until the command has ended. @returns its exit code. */
  stop(): Promise<number | null>;
}

/** Ports that are free at this moment on loopback. */
export async function freePorts(count: number): Promise<number[]> {
  const servers = await Promise.all(
    Array.from({ length: count }, async () => {
      const server = createServer();
      await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
      return server;
    }),
  );
  const ports = servers.map((server) => (server.address() as { port: number }).port);
  await Promise.all(servers.map((server) => new Promise((resolve) => server.close(resolve))));
  return ports;
}

/** A data folder and ports for one stack; handed to `startStack` more than once to stop and start again. */
export async function newPlace(options: { demo: boolean }): Promise<Record<string, string>> {
  const [web, ws, files, database, smtp] = await freePorts(5);
  const folder = await mkdtemp(path.join(tmpdir(), 'motebook-e2e-'));
  return {
    MOTEBOOK_DATA: folder,
    MOTEBOOK_PORT: String(web),
    MOTEBOOK_WS_PORT: String(ws),
    MOTEBOOK_FILES_PORT: String(files),
    MOTEBOOK_DB_PORT: String(database),
    MOTEBOOK_SMTP_PORT: String(smtp),
    MOTEBOOK_DEMO: options.demo ? 'yes' : 'no',
  };
}

/** Runs `node start.mjs` and waits until it says that the product is ready. */
export async function startStack(place: Record<string, string>): Promise<Stack> {
  // What vitest says of itself is no business of the product's.
  const { NODE_ENV: _mode, VITEST: _vitest, ...inherited } = process.env;
  const child: ChildProcess = spawn(process.execPath, ['start.mjs'], {
    cwd: PROJECT,
    env: { ...inherited, ...place } as NodeJS.ProcessEnv,
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let printed = '';
  for (const stream of [child.stdout, child.stderr]) {
    stream?.setEncoding('utf8');
    stream?.on('data', (text: string) => (printed += text));
  }
  const url = await firstAddress(child, () => printed);
  return {
    url,
    dataFolder: place.MOTEBOOK_DATA ?? '',
    environment: place,
    output: () => printed,
    stop: () => end(child),
  };
}

/** Removes what a stopped stack left behind. */
export async function removePlace(place: Record<string, string>): Promise<void> {
  await rm(place.MOTEBOOK_DATA ?? '', { recursive: true, force: true });
}

async function firstAddress(child: ChildProcess, printed: () => string): Promise<string> {
  // A cold build takes minutes on a small machine; this is only the point at which waiting makes no sense any more.
  const deadline = Date.now() + 12 * 60_000;
  for (;;) {
    const found = /is ready: (http:\/\/127\.0\.0\.1:\d+)/.exec(printed())?.[1];
    if (found && (await answers(`${found}/sign-in`))) return found;
    if (child.exitCode !== null) throw new Error(`start ended with ${child.exitCode}:\n${printed()}`);
    if (Date.now() > deadline) throw new Error(`start never became ready:\n${printed()}`);
    await new Promise((resolve) => setTimeout(resolve, 250));
  }
}

async function answers(url: string): Promise<boolean> {
  try {
    return (await fetch(url)).ok;
  } catch {
    return false;
  }
}

async function end(child: ChildProcess): Promise<number | null> {
  if (child.exitCode !== null || child.signalCode !== null) return child.exitCode;
  const ended = new Promise<number | null>((resolve) => child.once('exit', (code) => resolve(code)));
  child.kill('SIGINT');
  return ended;
}
