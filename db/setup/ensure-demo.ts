import { existsSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import pg from 'pg';
import { fillDemoIfEmpty, type DemoContext } from './demo';
import { demoPeople } from './demo-accounts';

/** Who has an account: nobody, the people of the demo, others. */
export type Population = 'nobody' | 'demo' | 'others';

/**
 * Fills the demo into a database without people, if it is wanted.
 * @param folder - data folder; a note stands there while the demo is being filled, because a filling that was cut short
 * cannot be taken back: the record is insert-only.
 */
export async function ensureDemo(folder: string, wanted: boolean, context: DemoContext): Promise<Population> {
  const unfinished = path.join(folder, 'demo-unfinished');
  const before = await getPopulation(context.appUrl);
  if (before !== 'nobody' && existsSync(unfinished)) {
    context.say('The demo is incomplete: its filling was cut short. To begin anew: npm run reset');
  }
  if (before !== 'nobody' || !wanted) return before;
  writeFileSync(unfinished, '');
  await fillDemoIfEmpty(context);
  rmSync(unfinished);
  return getPopulation(context.appUrl);
}

async function getPopulation(appUrl: string): Promise<Population> {
  const client = new pg.Client({ connectionString: appUrl, application_name: 'motebook-start' });
  client.on('error', (error) => console.error(`database connection lost (start): ${error.message}`));
  await client.connect();
  try {
    const { rows } = await client.query<{ people: boolean; demo: boolean }>(
      'SELECT EXISTS (SELECT 1 FROM person) AS people, EXISTS (SELECT 1 FROM person WHERE login = $1) AS demo',
      [demoPeople[0]?.login ?? ''],
    );
    if (!rows[0]?.people) return 'nobody';
    return rows[0].demo ? 'demo' : 'others';
  } finally {
    await client.end();
  }
}
