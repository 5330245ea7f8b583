import { existsSync, readdirSync, rmdirSync, rmSync } from 'node:fs';
import path from 'node:path';
import { endOrphans, endRunning } from './run-note';

/** What Motebook itself puts into its data folder. Anything else there belongs to somebody else and stays. */
const OURS = [
  'pg',
  'pg.new',
  'files',
  'cache',
  'logs',
  'mail',
  'demo-unfinished',
  'run.json',
  'secrets.json',
  'secrets.json.new',
];

/** Stops what runs on a data folder, removes the data, and says so. */
export async function reset(project: string, folder: string, say: (line: string) => void): Promise<void> {
  if (await endRunning(folder, project)) say('Stopped the running Motebook.');
  await endOrphans(folder, project);
  const there = OURS.filter((name) => existsSync(path.join(folder, name)));
  if (there.length === 0) return say(`There are no data to remove in ${folder}.`);
  for (const name of there) rmSync(path.join(folder, name), { recursive: true, force: true });
  if (readdirSync(folder).length === 0) rmdirSync(folder);
  say(`Removed all data in ${folder}. The next start begins anew.`);
}
