import { spawn } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { aptInstall, getPostgresBinaries, isRoot } from '../db/setup/postgres-binaries';
import type { Counts } from './count-reporter';

/** Pure units, then tests with a real PostgreSQL and real sockets, then journeys in a browser: the quickest fault first. */
const RUNNERS = ['units', 'live', 'e2e'];
const CHROMIUM = ['/usr/bin/chromium', '/usr/bin/chromium-browser'];

const project = path.resolve(import.meta.dirname, '..');
const say = (line: string) => console.log(line);
const ending = new AbortController();

async function main(): Promise<boolean> {
  getPostgresBinaries(say);
  ensureChromium();
  const folder = mkdtempSync(path.join(tmpdir(), 'motebook-counts-'));
  const total: Counts = { passed: 0, failed: 0, skipped: 0, skips: [] };
  try {
    for (const name of RUNNERS) {
      if (ending.signal.aborted) break;
      const counts = await run(name, path.join(folder, `${name}.json`));
      total.passed += counts.passed;
      total.failed += counts.failed;
      total.skipped += counts.skipped;
      total.skips.push(...counts.skips);
      say(`${name}: ${counts.passed} passed, ${counts.failed} failed, ${counts.skipped} skipped\n`);
    }
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
  if (total.skips.length > 0) say(`Skipped:\n${total.skips.map((line) => `  ${line}`).join('\n')}\n`);
  say(`${total.passed} passed, ${total.failed} failed, ${total.skipped} skipped`);
  return total.failed === 0 && !ending.signal.aborted;
}

/** Runs one vitest project. One that breaks off, or runs nothing, has failed. */
async function run(name: string, counted: string): Promise<Counts> {
  const reporters = ['--reporter=default', `--reporter=${path.join(project, 'scripts/count-reporter.ts')}`];
  const vitest = ['node_modules/vitest/vitest.mjs', 'run', '--project', name, ...reporters];
  const child = spawn(process.execPath, vitest, {
    cwd: project,
    stdio: ['ignore', 'inherit', 'inherit'],
    env: { ...outerEnvironment(), MOTEBOOK_TEST_COUNTS: counted },
  });
  const stop = () => child.kill('SIGINT');
  ending.signal.addEventListener('abort', stop);
  const code = await new Promise<number | null>((resolve, reject) => {
    child.once('error', reject);
    child.once('close', resolve);
  });
  ending.signal.removeEventListener('abort', stop);
  const none: Counts = { passed: 0, failed: 0, skipped: 0, skips: [] };
  const counts = existsSync(counted) ? (JSON.parse(readFileSync(counted, 'utf8')) as Counts) : none;
  if (counts.failed === 0 && (code !== 0 || counts.passed === 0)) {
    say(
      code === 0
        ? `${name} ran no test.`
        : `${name} ended with ${code ?? 'a signal'}, though no test failed.`,
    );
    counts.failed = 1;
  }
  return counts;
}

/** The tests choose ports and folders of their own: what is set for the product must not reach them. */
function outerEnvironment(): NodeJS.ProcessEnv {
  const kept = Object.entries(process.env).filter(
    ([name]) => !/^(MOTEBOOK_|NEXTAUTH_|UPLOADTHING_|NODE_ENV$)/.test(name),
  );
  return Object.fromEntries(kept) as NodeJS.ProcessEnv;
}

/** @throws Error with the remedy, when the browser is missing and this user may not install it. */
function ensureChromium(): void {
  if (CHROMIUM.some((file) => existsSync(file))) return;
  if (!isRoot()) {
    throw new Error(
      'The browser journeys need chromium, and only root may install it. Run "sudo apt-get install chromium", then test again.',
    );
  }
  say('Installing chromium from Debian …');
  aptInstall('chromium');
}

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP', 'disconnect'] as const)
  process.on(signal, () => ending.abort());

main().then(
  (good) => process.exit(good ? 0 : 1),
  (error: unknown) => {
    console.error(error instanceof Error ? error.message : error);
    process.exit(1);
  },
);
