import { spawn, spawnSync } from 'node:child_process';
import { appendFileSync, existsSync, mkdtempSync, readFileSync, renameSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { checkServer } from '../../../db/setup/check-server';
import { ensureCluster, type Cluster } from '../../../db/setup/cluster';
import { migrateDatabase } from '../../../db/setup/migrate';
import { findPostgresBinaries, isRoot } from '../../../db/setup/postgres-binaries';
import { DATABASE_ROLES } from '../../../db/setup/roles';
import { freePort } from '../../helpers/global-cluster';

const PROJECT = path.resolve(import.meta.dirname, '../../..');
const say = () => undefined;
let folder: string;
let cluster: Cluster;

beforeAll(async () => {
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-cluster-'));
  cluster = await ensureCluster({ folder, port: await freePort(), say });
  await migrateDatabase(cluster.url('motebook_owner'));
});
afterAll(async () => {
  await cluster.stop();
  rmSync(folder, { recursive: true, force: true });
});

async function query<Row extends pg.QueryResultRow>(url: string, text: string): Promise<Row[]> {
  const client = new pg.Client({ connectionString: url });
  client.on('error', () => undefined);
  await client.connect();
  try {
    return (await client.query<Row>(text)).rows;
  } finally {
    await client.end();
  }
}

async function until(condition: () => boolean, what: string): Promise<void> {
  const deadline = Date.now() + 60_000;
  while (!condition()) {
    if (Date.now() > deadline) throw new Error(`${what} did not come about`);
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}

describe('who may sign in', () => {
  test('never the superuser, with or without a password', async () => {
    for (const password of ['', ':postgres', `:${cluster.secrets.databasePasswords.motebook_owner}`]) {
      const url = `postgres://postgres${password}@127.0.0.1:${cluster.port}/motebook`;
      await expect(query(url, 'SELECT 1')).rejects.toThrow(/pg_hba\.conf/);
    }
  });

  test('each role with its own password only', async () => {
    for (const role of DATABASE_ROLES) {
      const rows = await query<{ name: string }>(cluster.url(role), 'SELECT current_user AS name');
      expect(rows).toEqual([{ name: role }]);
      const wrong = cluster.url(role).replace(/:[0-9a-f]+@/, `:${'0'.repeat(48)}@`);
      await expect(query(wrong, 'SELECT 1')).rejects.toThrow(/password authentication failed/);
    }
  });

  test('only over loopback, to the one database, and no role may make another', async () => {
    // Lines 5 and 6 of the server's lock file: folder of its socket, address it listens on (PostgreSQL, miscadmin.h).
    const lock = readFileSync(path.join(folder, 'pg', 'postmaster.pid'), 'utf8').split('\n');
    expect(lock.slice(4, 6)).toEqual(['', '127.0.0.1']);
    await expect(query(cluster.url('motebook_app', 'postgres'), 'SELECT 1')).rejects.toThrow(
      /permission denied/,
    );
    await expect(query(cluster.url('motebook_owner'), 'CREATE DATABASE other')).rejects.toThrow(
      /permission denied/,
    );
  });

  test('the backup role can dump everything', () => {
    const program = path.join(findPostgresBinaries() ?? '', 'pg_dump');
    const dump = spawnSync(program, [cluster.url('motebook_backup')], { encoding: 'utf8' });
    expect(dump.stderr).toBe('');
    expect(dump.status).toBe(0);
    expect(dump.stdout).toContain('CREATE TABLE public.entry_update');
    expect(dump.stdout).toContain('COPY public.person');
  });
});

test('the secrets are readable by their owner alone', () => {
  const file = path.join(folder, 'secrets.json');
  expect(statSync(file).mode & 0o777).toBe(0o600);
  expect(statSync(folder).mode & 0o777).toBe(0o711);
  if (isRoot()) {
    expect(spawnSync('runuser', ['-u', 'postgres', '--', 'test', '-r', file]).status).toBe(1);
    expect(statSync(path.join(folder, 'pg')).uid).not.toBe(0);
  }
});

test('data are checked and durable, and a server that would not be is refused', async () => {
  await checkServer(cluster.url('motebook_app'));
  await checkServer(cluster.url('motebook_ws'));
  const rows = await query(cluster.url('motebook_read'), 'SHOW data_checksums');
  expect(rows).toEqual([{ data_checksums: 'on' }]);
  await cluster.stop();
  const conf = path.join(folder, 'pg', 'postgresql.conf');
  appendFileSync(conf, 'full_page_writes = off\nfsync = off\n');
  await cluster.start();
  await expect(checkServer(cluster.url('motebook_app'))).rejects.toThrow(/fsync, full_page_writes = on/);
  await cluster.stop();
  appendFileSync(conf, 'full_page_writes = on\nfsync = on\n');
  await cluster.start();
  await checkServer(cluster.url('motebook_app'));
});

test('what was committed is there after the server was killed, and after stop and start', async () => {
  const app = cluster.url('motebook_app');
  await query(app, `INSERT INTO audit (kind) VALUES ('before the kill')`);
  let lost = false;
  cluster.server.onLost = () => (lost = true);
  process.kill(cluster.server.pid ?? 0, 'SIGKILL');
  await until(() => lost, 'the notice that the server is lost');
  await cluster.start();
  await query(app, `INSERT INTO audit (kind) VALUES ('before the stop')`);
  await cluster.stop();
  expect(existsSync(path.join(folder, 'pg', 'postmaster.pid'))).toBe(false);

  const again = await ensureCluster({ folder, port: cluster.port, say });
  expect(again.secrets).toEqual(cluster.secrets);
  expect(await query(app, 'SELECT kind FROM audit ORDER BY id')).toEqual([
    { kind: 'before the kill' },
    { kind: 'before the stop' },
  ]);
  await again.stop();
  await cluster.start();
});

test('without its secrets a database is not made anew over the old one', async () => {
  const file = path.join(folder, 'secrets.json');
  await cluster.stop();
  renameSync(file, `${file}.aside`);
  await expect(ensureCluster({ folder, port: cluster.port, say })).rejects.toThrow(
    /secrets\.json is missing/,
  );
  renameSync(`${file}.aside`, file);
  await cluster.start();
  expect((await query(cluster.url('motebook_app'), 'SELECT 1 FROM audit')).length).toBeGreaterThan(0);
});

test('the server ends with the process that started it, even when that is killed, and can be started again', async () => {
  await cluster.stop();
  const holder = spawn(
    process.execPath,
    ['--import', 'tsx', 'tests/helpers/hold-cluster.ts', folder, String(cluster.port)],
    { cwd: PROJECT, stdio: ['ignore', 'pipe', 'inherit'] },
  );
  let printed = '';
  holder.stdout.setEncoding('utf8').on('data', (text: string) => (printed += text));
  await until(() => /server \d+/.test(printed), 'a server');
  const pid = Number(/server (\d+)/.exec(printed)?.[1]);
  expect(readFileSync(`/proc/${pid}/comm`, 'utf8').trim()).toBe('postgres');
  holder.kill('SIGKILL');
  // Started at once, while the old one may still be on its way down.
  await cluster.start();
  expect(cluster.server.pid).not.toBe(pid);
  expect(await query(cluster.url('motebook_app'), 'SELECT 1 AS one')).toEqual([{ one: 1 }]);
});

test('a port that is taken is reported with the server’s own words', async () => {
  const other = mkdtempSync(path.join(tmpdir(), 'motebook-cluster-'));
  try {
    await expect(ensureCluster({ folder: other, port: cluster.port, say })).rejects.toThrow(
      /PostgreSQL does not start[\s\S]*(in use|could not bind)/,
    );
  } finally {
    rmSync(other, { recursive: true, force: true });
  }
});
