import { existsSync } from 'node:fs';
import path from 'node:path';
import { readSettings } from '../env';
import { dataFolder } from './data-folder';
import { reset } from './reset';
import { startDemo } from './start-demo';
import { startProduction } from './start-production';

/**
 * Brings up everything, keeps it running, and takes it down again. `npm start`, `npm run dev` and `npm run reset` all end
 * here, after start.mjs has made sure of Node and the packages.
 */

const project = path.resolve(import.meta.dirname, '../..');
const say = (line: string) => console.log(line);

async function main(): Promise<void> {
  const file = path.join(project, '.env');
  // What the real environment says wins.
  if (existsSync(file)) process.loadEnvFile(file);
  const settings = readSettings();
  const folder = dataFolder(project, settings.MOTEBOOK_DATA);
  const dev = process.argv.includes('--dev');
  const production = settings.MOTEBOOK_MODE === 'production';
  if (process.argv.includes('--reset')) {
    if (production)
      throw new Error('In production nothing is removed by a command (MOTEBOOK_MODE is production).');
    return reset(project, folder, say);
  }
  if (production && dev)
    throw new Error('The development server is not for production (MOTEBOOK_MODE is production).');
  await (production ? startProduction : startDemo)({ project, folder, settings, dev, say });
}

main().then(
  () => process.exit(0),
  (error: unknown) => {
    console.error(error instanceof Error ? error.message : error);
    process.exit(1);
  },
);
