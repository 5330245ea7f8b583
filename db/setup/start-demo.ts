import { mkdirSync } from 'node:fs';
import path from 'node:path';
import type { Settings } from '../env';
import { ensureBuild } from './build';
import { checkServer } from './check-server';
import { ensureCluster } from './cluster';
import { makeDataFolder } from './data-folder';
import { DEMO_PASSWORD, demoPeople } from './demo-accounts';
import { ensureDemo, type Population } from './ensure-demo';
import { migrateDatabase } from './migrate';
import { addresses, demoPlan } from './plan';
import { refuseBusyPorts, waitForAnswer, waitForListener } from './ports';
import { endOrphans, refuseSecondStart } from './run-note';
import { Supervisor } from './supervisor';

export interface StartOptions {
  readonly project: string;
  readonly folder: string;
  readonly settings: Settings;
  readonly dev: boolean;
  readonly say: (line: string) => void;
}

/** Everything of its own on loopback: cluster, migrations, build, processes, demo. Returns when all of it has ended. */
export async function startDemo({ project, folder, settings, dev, say }: StartOptions): Promise<void> {
  refuseSecondStart(folder, project);
  await endOrphans(folder, project);
  await refuseBusyPorts({
    MOTEBOOK_PORT: settings.MOTEBOOK_PORT,
    MOTEBOOK_WS_PORT: settings.MOTEBOOK_WS_PORT,
    MOTEBOOK_FILES_PORT: settings.MOTEBOOK_FILES_PORT,
    MOTEBOOK_DB_PORT: settings.MOTEBOOK_DB_PORT,
    MOTEBOOK_SMTP_PORT: settings.MOTEBOOK_SMTP_PORT,
  });
  makeDataFolder(folder);
  for (const name of ['files', 'cache', 'mail'])
    mkdirSync(path.join(folder, name), { recursive: true, mode: 0o700 });
  const at = addresses(settings);
  await new Supervisor(project, folder, at.product, say).run(async (supervisor) => {
    const { signal } = supervisor;
    const cluster = await ensureCluster({ folder, port: settings.MOTEBOOK_DB_PORT, say });
    supervisor.adopt(cluster);
    const ownerUrl = cluster.url('motebook_owner');
    await migrateDatabase(ownerUrl);
    for (const role of ['motebook_app', 'motebook_ws'] as const) await checkServer(cluster.url(role));
    signal.throwIfAborted();
    if (!dev) await ensureBuild(project, say, signal);
    supervisor.startChildren(demoPlan(settings, cluster, folder, dev));
    await waitForListener(settings.MOTEBOOK_FILES_PORT, 'The file service', 60, signal);
    await waitForListener(settings.MOTEBOOK_SMTP_PORT, 'The local mail server', 60, signal);
    await waitForListener(settings.MOTEBOOK_WS_PORT, 'The websocket server', 60, signal);
    await waitForAnswer(`${at.product}/sign-in`, 120, signal);
    const population = await ensureDemo(folder, settings.MOTEBOOK_DEMO === 'yes', {
      origin: at.product,
      ownerUrl,
      appUrl: cluster.url('motebook_app'),
      say,
    });
    signal.throwIfAborted();
    greet(at.product, population, say);
  });
}

function greet(product: string, population: Population, say: (line: string) => void): void {
  say(`\nMotebook is ready: ${product}\n`);
  if (population === 'demo') {
    say('Demo accounts, all with the same password:');
    for (const { login, name, role, admin } of demoPeople) {
      say(`  ${login.padEnd(12)} ${name}, ${admin ? `${role} and administrator` : role}`);
    }
    say(`  password     ${DEMO_PASSWORD}\n`);
  }
  if (population === 'nobody') say('Nobody has an account yet. To make one: npm run add-person -- --help\n');
  say('Ctrl-C stops everything; the data stay.');
}
