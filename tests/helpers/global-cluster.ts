import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { TestProject } from 'vitest/node';
import { ensureCluster } from '../../db/setup/cluster';
import { migrateDatabase } from '../../db/setup/migrate';
import type { DatabaseRole } from '../../db/setup/roles';

declare module 'vitest' {
  interface ProvidedContext {
    databasePort: number;
    databasePasswords: Readonly<Record<DatabaseRole, string>>;
    clusterFolder: string;
  }
}

/** One PostgreSQL for all tests of a run; every test copies the migrated database, which nobody else connects to. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const folder = mkdtempSync(path.join(tmpdir(), 'motebook-test-'));
  const port = await freePort();
  const cluster = await ensureCluster({ folder, port, say: () => undefined, ownerMakesDatabases: true });
  await migrateDatabase(cluster.url('motebook_owner'));
  project.provide('databasePort', port);
  project.provide('databasePasswords', cluster.secrets.databasePasswords);
  project.provide('clusterFolder', folder);
  return async () => {
    await cluster.stop();
    rmSync(folder, { recursive: true, force: true });
  };
}

export function freePort(): Promise<number> {
  return new Promise((resolve) => {
    const server = createServer().listen(0, '127.0.0.1', () => {
      const { port } = server.address() as { port: number };
      server.close(() => resolve(port));
    });
  });
}
