import { createHash } from 'node:crypto';
import { existsSync, lstatSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { end, endGroup, spawnNode } from './children';

/** What a build is made of; anything else (tests, papers) does not ask for a new one. */
const SOURCES = [
  'app',
  'components',
  'editor',
  'analysis',
  'db',
  'public',
  'proxy.ts',
  'instrumentation-client.ts',
  'next.config.mjs',
  'postcss.config.mjs',
  'tailwind.config.ts',
  'tsconfig.json',
  'package-lock.json',
];

/**
 * Builds the pages when their sources have changed since the last build.
 * @throws Error with what the build printed, when it fails; `signal`'s reason, when that ends it.
 */
export async function ensureBuild(
  project: string,
  say: (line: string) => void,
  signal: AbortSignal,
): Promise<void> {
  const wanted = hashOf(project, SOURCES);
  const stamp = path.join(project, '.next', 'motebook-sources');
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === wanted) return;
  say('Building the pages (a minute or two; only when the sources have changed) …');
  // A build that is cut short leaves pages that fit nobody's sources.
  const proof = path.join(project, '.next', 'BUILD_ID');
  for (const file of [stamp, proof]) rmSync(file, { force: true });
  const build = spawnNode(project, {
    name: 'build',
    args: ['node_modules/next/dist/bin/next', 'build'],
    environment: { NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' },
  });
  let printed = '';
  for (const stream of [build.stdout, build.stderr])
    stream?.on('data', (text: Buffer) => (printed += text.toString()));
  const stop = () => void end(build);
  signal.addEventListener('abort', stop, { once: true });
  const code = await new Promise<number | null>((resolve, reject) => {
    build.once('error', reject);
    build.once('exit', () => endGroup(build.pid));
    build.once('close', resolve);
  });
  signal.removeEventListener('abort', stop);
  signal.throwIfAborted();
  if (code !== 0 || !existsSync(proof)) {
    throw new Error(`The pages could not be built:\n${printed.trim()}`);
  }
  writeFileSync(stamp, wanted);
}

/** SHA-256 over names and contents of files and folders, in a fixed order. Links are passed over. */
export function hashOf(project: string, names: readonly string[]): string {
  const hash = createHash('sha256');
  const visit = (name: string) => {
    const full = path.join(project, name);
    if (!existsSync(full)) return;
    const stat = lstatSync(full);
    if (stat.isDirectory()) {
      for (const entry of readdirSync(full).sort()) visit(path.join(name, entry));
    } else if (stat.isFile()) {
      hash.update(`${name}\0${stat.size}\0`).update(readFileSync(full));
    }
  };
  for (const name of names) visit(name);
  return hash.digest('hex');
}
