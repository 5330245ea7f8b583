import { execFile } from 'node:child_process';
import path from 'node:path';
import { expect, test } from 'vitest';

/** What `npm run check` asks for, so that nothing lands that it would refuse. */
const PROJECT = path.resolve(import.meta.dirname, '../..');

function run(tool: string, ...args: string[]): Promise<{ code: number; said: string }> {
  return new Promise((resolve) => {
    execFile(
      process.execPath,
      [path.join(PROJECT, 'node_modules', tool), ...args],
      { cwd: PROJECT, maxBuffer: 10_000_000 },
      (error, out, err) => resolve({ code: error ? 1 : 0, said: (out + err).slice(-4000) }),
    );
  });
}

test.each([
  ['types are right', 'typescript/bin/tsc', '--noEmit', '--incremental', 'false'],
  ['no rule of lint is broken, and imports run one way', 'eslint/bin/eslint.js', '.', '--max-warnings', '0'],
  ['every file is formatted', 'prettier/bin/prettier.cjs', '--check', '.', '--log-level', 'warn'],
])('%s', { timeout: 300_000 }, async (_, tool, ...args) => {
  expect(await run(tool, ...args)).toEqual({ code: 0, said: expect.any(String) as string });
});
