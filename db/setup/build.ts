import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';

/** What a build is made of; anything else (tests, papers) does not ask for a new one. */
const SOURCES = [
  'app',
  'components',
  'editor',
  'analysis',
  'db',
  'public',
  'proxy.ts',
  'next.config.mjs',
  'postcss.config.mjs',
  'tailwind.config.ts',
  'tsconfig.json',
  'package-lock.json',
];

/** Builds the pages when their sources have changed since the last build. @throws Error when the build fails. */
export function ensureBuild(project: string, say: (line: string) => void): void {
  const wanted = hashOf(project, SOURCES);
  const stamp = path.join(project, '.next', 'motebook-sources');
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === wanted) return;
  say('Building the pages (a minute or two; only when the sources have changed) …');
  const run = spawnSync(process.execPath, ['node_modules/next/dist/bin/next', 'build'], {
    cwd: project,
    encoding: 'utf8',
    maxBuffer: 64 * 1024 * 1024,
    env: { ...process.env, NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' },
  });
  if (run.status !== 0) throw new Error(`The build failed:\n${run.stdout}\n${run.stderr}`);
  writeFileSync(stamp, wanted);
}

/** SHA-256 over names and contents of files and folders, in a fixed order. */
function hashOf(project: string, names: readonly string[]): string {
  const hash = createHash('sha256');
  const visit = (name: string) => {
    const full = path.join(project, name);
    if (!existsSync(full)) return;
    const entries = readdirSyncOrNull(full);
    if (entries) {
      for (const entry of entries.sort()) visit(path.join(name, entry));
      return;
    }
    const content = readFileSync(full);
    hash.update(`${name}\0${content.length}\0`).update(content);
  };
  for (const name of names) visit(name);
  return hash.digest('hex');
}

function readdirSyncOrNull(full: string): string[] | null {
  try {
    return readdirSync(full);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOTDIR') return null;
    throw error;
  }
}
