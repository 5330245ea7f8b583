import { existsSync, rmSync } from 'node:fs';
import path from 'node:path';
import { env, projectorEnv, readSettings, wsEnv, type Settings } from '../env';
import { ensureBuild } from './build';
import { Children, type ChildPlan } from './children';
import { ensureCluster, type Cluster } from './cluster';
import { dataFolder } from './data-folder';
import { fillDemoIfEmpty } from './demo';
import { DEMO_PASSWORD, demoPeople } from './demo-accounts';
import { migrateDatabase } from './migrate';
import { addresses, demoPlan, productionPlan } from './plan';
import { refuseBusyPorts, waitForAnswer, waitForListener } from './ports';
import { endOrphans, findRunNote, isOurs, removeRunNote, writeRunNote } from './run-note';

/**
 * Brings up everything: cluster, migrations, build, processes, demo; keeps it running; takes it down again. `npm start`,
 * `npm run dev` and `npm run reset` all end here, after start.mjs has made sure of Node and the packages.
 */

const project = path.resolve(import.meta.dirname, '../..');
const dev = process.argv.includes('--dev');
const say = (line: string) => console.log(line);

async function main(): Promise<void> {
  if (existsSync(path.join(project, '.env'))) process.loadEnvFile(path.join(project, '.env'));
  const settings = readSettings();
  if (process.argv.includes('--reset')) return reset(settings);
  await (settings.MOTEBOOK_MODE === 'production' ? startProduction(settings) : startDemo(settings));
}

async function startDemo(settings: Settings): Promise<void> {
  const folder = dataFolder(project, settings.MOTEBOOK_DATA);
  refuseSecondStart(folder);
  await endOrphans(folder, project);
  await refuseBusyPorts({
    MOTEBOOK_PORT: settings.MOTEBOOK_PORT,
    MOTEBOOK_WS_PORT: settings.MOTEBOOK_WS_PORT,
    MOTEBOOK_FILES_PORT: settings.MOTEBOOK_FILES_PORT,
  });
  const running = { cluster: null as Cluster | null, children: null as Children | null };
  const stop = stopOnce(async () => {
    await running.children?.stop();
    running.cluster?.stop();
    removeRunNote(folder);
  });

  try {
    await bringUp();
  } catch (error) {
    // Nothing may stay behind when the start does not succeed.
    await stop();
    throw error;
  }

  async function bringUp(): Promise<void> {
    running.cluster = ensureCluster({ folder, port: settings.MOTEBOOK_DB_PORT, say });
    await migrateDatabase(running.cluster.url('motebook_owner'));
    if (!dev) ensureBuild(project, say);
    const plans = demoPlan(settings, running.cluster, folder, dev);
    running.children = startChildren(plans, path.join(folder, 'logs'));
    const at = addresses(settings);
    writeRunNote(folder, { supervisor: process.pid, product: at.product, children: running.children.pids() });
    await waitForListener(settings.MOTEBOOK_FILES_PORT, 'The file service', 60);
    await waitForListener(settings.MOTEBOOK_WS_PORT, 'The websocket server', 60);
    await waitForAnswer(`${at.product}/sign-in`, 120);
    const filled =
      settings.MOTEBOOK_DEMO === 'yes' &&
      (await fillDemoIfEmpty({
        origin: at.product,
        ownerUrl: running.cluster.url('motebook_owner'),
        appUrl: running.cluster.url('motebook_app'),
        say,
      }));
    greet(at.product, filled);
    watch(running.cluster, running.children, folder, at.product, stop);
  }
}

/** In production nothing is made up: databases, secrets and the hosted service come from the environment. */
async function startProduction(settings: Settings): Promise<void> {
  for (const check of [env, wsEnv, projectorEnv]) check();
  const owner = process.env.MOTEBOOK_DATABASE_OWNER;
  if (owner) await migrateDatabase(owner);
  ensureBuild(project, say);
  const folder = dataFolder(project, settings.MOTEBOOK_DATA);
  const children = startChildren(productionPlan(settings), path.join(folder, 'logs'));
  stopOnce(() => children.stop());
  await waitForAnswer(`http://127.0.0.1:${settings.MOTEBOOK_PORT}/sign-in`, 120);
  say(`Motebook serves ${env().NEXTAUTH_URL} (locally on port ${settings.MOTEBOOK_PORT}).`);
}

async function reset(settings: Settings): Promise<void> {
  const folder = dataFolder(project, settings.MOTEBOOK_DATA);
  if (!existsSync(folder)) return say(`There are no data to remove (${folder}).`);
  refuseSecondStart(folder);
  await endOrphans(folder, project);
  if (existsSync(path.join(folder, 'pg', 'postmaster.pid'))) {
    ensureCluster({ folder, port: settings.MOTEBOOK_DB_PORT, say }).stop();
  }
  rmSync(folder, { recursive: true, force: true });
  say(`Removed all data in ${folder}. The next start begins anew.`);
}

function refuseSecondStart(folder: string): void {
  const note = findRunNote(folder);
  if (!note || !isOurs(note.supervisor, project)) return;
  throw new Error(
    `Motebook already runs from this folder at ${note.product}. Stop it there with Ctrl-C (process ${note.supervisor}) first.`,
  );
}

function startChildren(plans: ChildPlan[], logFolder: string): Children {
  const children = new Children(project, logFolder, say);
  for (const plan of plans) children.start(plan);
  return children;
}

/** Ctrl-C, a polite kill, or the end of start.mjs: all of them stop everything, once. */
function stopOnce(run: () => Promise<void>): () => Promise<void> {
  let stopping: Promise<void> | null = null;
  const stop = () => (stopping ??= run());
  const end = () => {
    stop().then(
      () => process.exit(0),
      (error: unknown) => {
        console.error(error);
        process.exit(1);
      },
    );
  };
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, end);
  process.on('disconnect', end);
  return stop;
}

/** Starts PostgreSQL again when its first process is gone, and keeps the note of pids true. */
function watch(
  cluster: Cluster,
  children: Children,
  folder: string,
  product: string,
  stop: () => Promise<void>,
): void {
  let last = '';
  setInterval(() => {
    const now = JSON.stringify(children.pids());
    if (now !== last) writeRunNote(folder, { supervisor: process.pid, product, children: children.pids() });
    last = now;
    if (cluster.isRunning()) return;
    say('PostgreSQL ended; starting it again.');
    try {
      cluster.start();
    } catch (error) {
      console.error(error instanceof Error ? error.message : error);
      void stop().then(() => process.exit(1));
    }
  }, 500);
}

function greet(product: string, withDemo: boolean): void {
  say(`\nMotebook is ready: ${product}\n`);
  if (withDemo) {
    say('Demo accounts (all with the same password):');
    for (const one of demoPeople)
      say(`  ${one.login.padEnd(12)} ${one.name}, ${one.admin ? 'administrator' : one.role}`);
    say(`  password: ${DEMO_PASSWORD}\n`);
  } else {
    say('Make an account with: npm run add-person -- --help\n');
  }
  say('Ctrl-C stops everything; the data stay.');
}

main().catch((error: unknown) => {
  console.error(error instanceof Error ? error.message : error);
  process.exit(1);
});
