import { createHash } from 'node:crypto';
import { chmodSync, existsSync, mkdirSync, mkdtempSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { dataFolder, findClosedParent, makeDataFolder } from '../../../db/setup/data-folder';
import { isRoot } from '../../../db/setup/postgres-binaries';

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-folder-'));
  chmodSync(folder, 0o755);
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

describe('where the data lie', () => {
  test('under the project, for an ordinary user and for root where others may pass', () => {
    expect(dataFolder(folder, undefined, false)).toBe(path.join(folder, '.motebook'));
    expect(dataFolder(folder, undefined, true)).toBe(path.join(folder, '.motebook'));
  });

  test('for root under a closed folder in /var/lib, by the hash of the project path', () => {
    const project = path.join(folder, 'closed', 'motebook');
    mkdirSync(project, { recursive: true });
    chmodSync(path.dirname(project), 0o700);
    const name = createHash('sha256').update(project).digest('hex').slice(0, 12);
    expect(dataFolder(project, undefined, true)).toBe(`/var/lib/motebook/${name}`);
    expect(dataFolder(project, undefined, false)).toBe(path.join(project, '.motebook'));
  });

  test('where the environment says, taken from the project folder when it is relative', () => {
    expect(dataFolder(folder, '/srv/motes', true)).toBe('/srv/motes');
    expect(dataFolder(folder, 'data', true)).toBe(path.join(folder, 'data'));
  });
});

test('the first closed folder on the way is named', () => {
  const inner = path.join(folder, 'a', 'b');
  mkdirSync(inner, { recursive: true });
  expect(findClosedParent(inner)).toBeNull();
  chmodSync(path.join(folder, 'a'), 0o750);
  expect(findClosedParent(inner)).toBe(path.join(folder, 'a'));
});

test('others may pass through a new data folder but not look around, whatever the umask', () => {
  const before = process.umask(0o077);
  try {
    const made = path.join(folder, 'x', 'data');
    makeDataFolder(made);
    expect(statSync(made).mode & 0o777).toBe(0o711);
    expect(statSync(path.dirname(made)).mode & 0o777).toBe(0o711);
  } finally {
    process.umask(before);
  }
});

test('no right is taken from a folder that was there before', () => {
  makeDataFolder(folder);
  expect(statSync(folder).mode & 0o777).toBe(0o755);
});

test.runIf(isRoot())(
  'as root, a folder that postgres cannot reach is refused with the remedy, and not made',
  () => {
    chmodSync(folder, 0o700);
    const made = path.join(folder, 'data', 'inner');
    expect(() => makeDataFolder(made)).toThrow(new RegExp(`chmod o\\+x ${folder}$`));
    expect(existsSync(path.join(folder, 'data'))).toBe(false);
  },
);
