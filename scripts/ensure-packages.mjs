// Checks Node and installs the npm packages when they are missing or the lock file has changed. Plain Node.
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';

const OLDEST_NODE = [20, 12];

/**
 * @param {string} project - folder of the checkout
 * @throws {Error} with the remedy, when Node is too old or the packages cannot be installed
 */
export async function ensurePackages(project) {
  checkNode(process.versions.node);
  const lock = readFileSync(path.join(project, 'package-lock.json'));
  const wanted = createHash('sha256').update(lock).digest('hex');
  const stamp = path.join(project, 'node_modules', '.motebook-lock');
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === wanted) return;
  console.log('Installing the npm packages (once; a minute or two) …');
  // Development packages too, whatever NODE_ENV says: the build needs them.
  const run = spawnSync('npm', ['ci', '--include=dev', '--no-fund', '--no-audit', '--loglevel=error'], {
    cwd: project,
    stdio: ['ignore', 'ignore', 'inherit'],
  });
  if (run.status !== 0) {
    throw new Error('The npm packages could not be installed. Check the network, then run the same command again.');
  }
  writeFileSync(stamp, wanted);
}

/**
 * @param {string} version - e.g. "20.12.0"
 * @throws {Error} when it is older than what the packages need
 */
export function checkNode(version) {
  const [major = 0, minor = 0] = version.split('.').map(Number);
  const [needMajor, needMinor] = OLDEST_NODE;
  if (major > needMajor || (major === needMajor && minor >= needMinor)) return;
  throw new Error(
    `Motebook needs Node ${OLDEST_NODE.join('.')} or newer; this is Node ${version}. Install Node 20 (for example from nodejs.org), then start again.`,
  );
}
