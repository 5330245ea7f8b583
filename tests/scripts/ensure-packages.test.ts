import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { findNodeFault } from '../../scripts/check-node.mjs';
import { arePackagesInstalled } from '../../scripts/ensure-packages.mjs';

let project: string;
beforeEach(() => {
  project = mkdtempSync(path.join(tmpdir(), 'motebook-packages-'));
  mkdirSync(path.join(project, 'node_modules'));
});
afterEach(() => rmSync(project, { recursive: true, force: true }));

interface Listed {
  version: string;
  optional?: boolean;
  dev?: boolean;
}
const list = (file: string, packages: Record<string, Listed>) =>
  writeFileSync(path.join(project, file), JSON.stringify({ lockfileVersion: 3, packages }));
const want = (packages: Record<string, Listed>) =>
  list('package-lock.json', { '': { version: '1.0.0' }, ...packages });
const have = (packages: Record<string, Listed>) => list('node_modules/.package-lock.json', packages);

describe('whether the packages are those of the lock file', () => {
  const next = { 'node_modules/next': { version: '16.4.6' } };

  test('yes when every version fits; packages for other machines may be absent', () => {
    want({ ...next, 'node_modules/other-machine': { version: '1.0.0', optional: true } });
    have(next);
    expect(arePackagesInstalled(project)).toBe(true);
  });

  test('no when nothing is installed, or an installation was cut short', () => {
    want(next);
    expect(arePackagesInstalled(project)).toBe(false);
  });

  test('no when a version differs, even of an optional package, or a package is missing', () => {
    have(next);
    want({ 'node_modules/next': { version: '16.4.7' } });
    expect(arePackagesInstalled(project)).toBe(false);
    want({ 'node_modules/next': { version: '16.4.7', optional: true } });
    expect(arePackagesInstalled(project)).toBe(false);
    want({ ...next, 'node_modules/vitest': { version: '4.1.12', dev: true } });
    expect(arePackagesInstalled(project)).toBe(false);
  });

  test('a project without its lock file is named as incomplete', () => {
    expect(() => arePackagesInstalled(project)).toThrow(/package-lock\.json is missing/);
  });
});

describe('which Node will do', () => {
  test.each(['20.12.0', '20.20.2', '21.0.0', '22.1.0', '24.0.0'])('%s will do', (version) =>
    expect(findNodeFault(version)).toBeNull(),
  );
  test.each(['8.17.0', '16.20.2', '18.20.0', '20.9.0', '20.11.1'])(
    '%s is named with the remedy',
    (version) => {
      const fault = findNodeFault(version);
      expect(fault).toContain(`this is Node ${version}`);
      expect(fault).toContain('Install Node 20');
    },
  );
});
