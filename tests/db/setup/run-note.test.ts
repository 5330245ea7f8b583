import { spawn, type ChildProcess } from 'node:child_process';
import { existsSync, mkdirSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { reset } from '../../../db/setup/reset';
import { endOrphans, findRunNote, isOurs, refuseSecondStart, writeRunNote } from '../../../db/setup/run-note';

let project: string;
let folder: string;
let processes: ChildProcess[] = [];
beforeEach(() => {
  project = mkdtempSync(path.join(tmpdir(), 'motebook-note-'));
  folder = path.join(project, 'data');
  mkdirSync(folder);
});
afterEach(() => {
  for (const child of processes) child.kill('SIGKILL');
  processes = [];
  rmSync(project, { recursive: true, force: true });
});

/** A process that looks like one of the project's: its path on the command line, its folder as working directory. */
function run(cwd: string, named: boolean): number {
  const child = spawn(
    process.execPath,
    ['--eval', 'setInterval(() => {}, 1000)', named ? `${project}/main.ts` : 'x'],
    {
      cwd,
      stdio: 'ignore',
    },
  );
  processes.push(child);
  return child.pid ?? 0;
}

async function seen(pid: number): Promise<number> {
  const deadline = Date.now() + 10_000;
  while (!existsSync(`/proc/${pid}/cwd`) && Date.now() < deadline)
    await new Promise((r) => setTimeout(r, 10));
  return pid;
}

test('a pid is ours only by command line and folder together', async () => {
  expect(isOurs(await seen(run(project, true)), project)).toBe(true);
  expect(isOurs(await seen(run(project, false)), project)).toBe(false);
  expect(isOurs(await seen(run(tmpdir(), true)), project)).toBe(false);
  expect(isOurs(2 ** 22 + 1, project)).toBe(false);
});

test('orphans of a killed start are ended; strangers with a recycled pid are not', async () => {
  const orphan = await seen(run(project, true));
  const stranger = await seen(run(tmpdir(), false));
  writeRunNote(folder, {
    supervisor: 2 ** 22 + 1,
    product: 'http://127.0.0.1:1',
    children: { web: orphan, ws: stranger },
  });
  await endOrphans(folder, project);
  expect(isOurs(orphan, project)).toBe(false);
  expect(existsSync(`/proc/${stranger}/cwd`)).toBe(true);
  expect(findRunNote(folder)).toBeNull();
});

test('a second start is refused with the address of the first', async () => {
  const supervisor = await seen(run(project, true));
  writeRunNote(folder, { supervisor, product: 'http://127.0.0.1:4310', children: {} });
  expect(() => refuseSecondStart(folder, project)).toThrow(/http:\/\/127\.0\.0\.1:4310.*Ctrl-C/);
});

test('reset stops what runs, removes what Motebook made, and leaves what it did not', async () => {
  const supervisor = await seen(run(project, true));
  writeRunNote(folder, { supervisor, product: 'http://127.0.0.1:4310', children: {} });
  mkdirSync(path.join(folder, 'pg'));
  writeFileSync(path.join(folder, 'pg', 'x'), '');
  writeFileSync(path.join(folder, 'secrets.json'), '{}');
  writeFileSync(path.join(folder, 'thesis.txt'), 'not ours');
  const said: string[] = [];
  await reset(project, folder, (line) => said.push(line));
  expect(isOurs(supervisor, project)).toBe(false);
  expect(readdirSync(folder)).toEqual(['thesis.txt']);
  expect(said.join('\n')).toMatch(/Stopped[\s\S]*Removed all data/);

  rmSync(path.join(folder, 'thesis.txt'));
  mkdirSync(path.join(folder, 'files'));
  await reset(project, folder, () => undefined);
  expect(existsSync(folder)).toBe(false);
  await reset(project, folder, (line) => said.push(line));
  expect(said.at(-1)).toMatch(/no data to remove/);
});
