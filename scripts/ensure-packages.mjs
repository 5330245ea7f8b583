// Installs the npm packages when they are missing or the lock file has changed. Plain Node.
import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';

/**
 * @param {string} project - folder of the checkout
 * @param {(line: string) => void} say
 * @throws {Error} with the remedy, when the packages cannot be installed
 */
export function ensurePackages(project, say) {
  if (arePackagesInstalled(project)) return;
  say('Installing the npm packages (once; a minute or two) …');
  // Development packages too, whatever NODE_ENV says: the build needs them.
  const run = spawnSync('npm', ['ci', '--include=dev', '--no-fund', '--no-audit', '--loglevel=error'], {
    cwd: project,
    stdio: ['ignore', 'ignore', 'inherit'],
  });
  if (run.error)
    throw new Error(`npm cannot be run (${run.error.message}). Install npm, which comes with Node.`);
  if (run.status !== 0) {
    throw new Error(
      'The npm packages could not be installed. Check the network, then run the same command again.',
    );
  }
}

/**
 * Whether node_modules is what the lock file asks for, by the list that npm keeps of what it installed. It is written at
 * the end of an installation, so one that was cut short counts as missing.
 * @param {string} project
 */
export function arePackagesInstalled(project) {
  const installed = readPackages(path.join(project, 'node_modules', '.package-lock.json'));
  const wanted = readPackages(path.join(project, 'package-lock.json'));
  if (!wanted) throw new Error(`package-lock.json is missing in ${project}; take the whole project again.`);
  if (!installed) return false;
  return Object.entries(wanted).every(([name, { version, optional }]) => {
    const found = installed[name];
    // Packages for other machines are optional and absent here. The project itself has the empty name.
    return name === '' || (found ? found.version === version : optional === true);
  });
}

/**
 * @param {string} file
 * @returns {Record<string, { version?: string, optional?: boolean }> | null}
 */
function readPackages(file) {
  return existsSync(file) ? JSON.parse(readFileSync(file, 'utf8')).packages : null;
}
