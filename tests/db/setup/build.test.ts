import { mkdirSync, mkdtempSync, renameSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { hashOf } from '../../../db/setup/build';

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-build-'));
  mkdirSync(path.join(folder, 'app', 'page'), { recursive: true });
  writeFileSync(path.join(folder, 'app', 'page', 'a.ts'), 'one');
  writeFileSync(path.join(folder, 'app', 'b.ts'), 'two');
  writeFileSync(path.join(folder, 'tests.ts'), 'three');
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

test('the hash follows names and contents of the sources, and nothing else', () => {
  const hash = () => hashOf(folder, ['app', 'proxy.ts']);
  const before = hash();
  expect(before).toMatch(/^[0-9a-f]{64}$/);
  writeFileSync(path.join(folder, 'tests.ts'), 'changed');
  symlinkSync('/etc/passwd', path.join(folder, 'app', 'link'));
  expect(hash()).toBe(before);

  writeFileSync(path.join(folder, 'proxy.ts'), '');
  const withProxy = hash();
  expect(withProxy).not.toBe(before);

  renameSync(path.join(folder, 'app', 'b.ts'), path.join(folder, 'app', 'c.ts'));
  const renamed = hash();
  expect(renamed).not.toBe(withProxy);

  writeFileSync(path.join(folder, 'app', 'page', 'a.ts'), 'ONE');
  expect(hash()).not.toBe(renamed);
});
