import { env, mailEnv, projectorEnv, wsEnv } from '../env';
import { ensureBuild } from './build';
import { checkServer } from './check-server';
import { makeDataFolder } from './data-folder';
import { migrateDatabase } from './migrate';
import { productionPlan } from './plan';
import { refuseBusyPorts, waitForAnswer, waitForListener } from './ports';
import { endOrphans, refuseSecondStart } from './run-note';
import type { StartOptions } from './start-demo';
import { Supervisor } from './supervisor';

/** In production nothing is made up: databases, secrets and the hosted services come from the environment. */
export async function startProduction({ project, folder, settings, say }: StartOptions): Promise<void> {
  refuseIncompleteEnvironment();
  refuseSecondStart(folder, project);
  await endOrphans(folder, project);
  await refuseBusyPorts({
    MOTEBOOK_PORT: settings.MOTEBOOK_PORT,
    MOTEBOOK_WS_PORT: settings.MOTEBOOK_WS_PORT,
  });
  makeDataFolder(folder);
  await new Supervisor(project, folder, env().NEXTAUTH_URL, say).run(async (supervisor) => {
    const { signal } = supervisor;
    const owner = process.env.MOTEBOOK_DATABASE_OWNER;
    if (owner) await migrateDatabase(owner);
    for (const url of [env().MOTEBOOK_DATABASE_APP, wsEnv().MOTEBOOK_DATABASE_WS]) await checkServer(url);
    signal.throwIfAborted();
    await ensureBuild(project, say, signal);
    supervisor.startChildren(productionPlan(settings));
    await waitForListener(settings.MOTEBOOK_WS_PORT, 'The websocket server', 60, signal);
    await waitForAnswer(`http://127.0.0.1:${settings.MOTEBOOK_PORT}/sign-in`, 120, signal);
    say(
      `Motebook serves ${env().NEXTAUTH_URL}; behind it, port ${settings.MOTEBOOK_PORT} for pages and ${settings.MOTEBOOK_WS_PORT} for live editing.`,
    );
  });
}

/** @throws Error that lists every fault of every process's environment, each once. */
export function refuseIncompleteEnvironment(): void {
  const lines = new Set<string>();
  for (const check of [env, wsEnv, projectorEnv, mailEnv]) {
    try {
      check();
    } catch (error) {
      for (const line of (error as Error).message.split('\n')) lines.add(line);
    }
  }
  if (lines.size > 0) throw new Error([...lines].join('\n'));
}
