import { spawn, type ChildProcess } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { Children } from '../../../db/setup/children';

const PROJECT = path.resolve(import.meta.dirname, '../../..');
let folder: string;
let parent: ChildProcess | null = null;
beforeEach(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-children-'));
});
afterEach(() => {
  parent?.kill('SIGKILL');
  parent = null;
  rmSync(folder, { recursive: true, force: true });
});

function isAlive(pid: number): boolean {
  try {
    // A process that nobody has collected yet is dead all the same.
    return !/^State:\s+Z/m.test(readFileSync(`/proc/${pid}/status`, 'utf8'));
  } catch {
    return false;
  }
}

async function until(condition: () => boolean, what: string): Promise<void> {
  const deadline = Date.now() + 30_000;
  while (!condition()) {
    if (Date.now() > deadline) throw new Error(`${what} did not come about`);
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}

/** A process that keeps two others running, and the ids that it has told so far. */
function startParent(): { pids: () => Record<string, number>; said: () => string } {
  let printed = '';
  parent = spawn(process.execPath, ['--import', 'tsx', 'tests/helpers/keep-running.ts', folder], {
    cwd: PROJECT,
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  parent.stdout?.setEncoding('utf8').on('data', (text: string) => (printed += text));
  const pids = () => {
    const last = printed.match(/^pids .*$/gm)?.at(-1);
    return last ? (JSON.parse(last.slice(5)) as Record<string, number>) : {};
  };
  return { pids, said: () => printed };
}

test('processes end with their parent, even when it is killed outright', async () => {
  const { pids } = startParent();
  await until(() => Object.keys(pids()).length === 2, 'two processes');
  const [first = 0, second = 0] = Object.values(pids());
  expect([first, second].every(isAlive)).toBe(true);
  parent?.kill('SIGKILL');
  await until(() => !isAlive(first) && !isAlive(second), 'the end of both processes');
});

test('a process that is killed is started again, and the log says so', async () => {
  const { pids, said } = startParent();
  await until(() => Object.keys(pids()).length === 2, 'two processes');
  const before = pids();
  process.kill(before.second ?? 0, 'SIGKILL');
  await until(() => (pids().second ?? before.second) !== before.second, 'a new second process');
  expect(said()).toMatch(/said second ended \(SIGKILL\); starting it again/);
  expect(pids().first).toBe(before.first);
  const all = Object.values(pids());
  parent?.kill('SIGTERM');
  await until(() => all.every((pid) => !isAlive(pid)), 'the end of all processes');
});

test('a process that forks others by a channel of their own can still wait for their answer', async () => {
  const children = new Children(PROJECT, folder, () => undefined);
  const file = path.join(folder, 'forker.mjs');
  // The worker has nothing to do but to wait for a question, as the workers of a build have.
  writeFileSync(
    file,
    `import { fork } from 'node:child_process';
     if (process.argv[2]) process.on('message', () => { process.send('answer'); process.exit(); });
     else {
       const worker = fork(process.argv[1], ['worker']);
       worker.on('message', (text) => console.log(text)).on('exit', () => process.exit());
       setTimeout(() => worker.send('question'), 1000);
     }`,
  );
  children.start({ name: 'forker', args: [file], environment: {} });
  await until(() => readFileSync(path.join(folder, 'forker.log'), 'utf8').includes('answer'), 'the answer');
  await children.stop();
});

test('what a killed process leaves behind is ended before it is started again', async () => {
  const children = new Children(PROJECT, folder, () => undefined);
  const program = `const { spawn } = require('node:child_process');
    const rest = spawn(process.execPath, ['--eval', 'setInterval(() => {}, 1000)'], { stdio: 'ignore' });
    console.log('rest', rest.pid); setInterval(() => {}, 1000);`;
  children.start({ name: 'leaver', args: ['--eval', program], environment: {} });
  const rests = () =>
    [...readFileSync(path.join(folder, 'leaver.log'), 'utf8').matchAll(/rest (\d+)/g)].map((m) =>
      Number(m[1]),
    );
  await until(() => rests().length === 1, 'a process of a process');
  const [rest = 0] = rests();
  process.kill(children.pids().leaver ?? 0, 'SIGKILL');
  await until(() => rests().length === 2, 'the second start');
  expect(isAlive(rest)).toBe(false);
  await children.stop();
  await until(() => !rests().some(isAlive), 'the end of all');
});

test('a process that dies at once, again and again, is reported as hopeless', async () => {
  const children = new Children(PROJECT, folder, () => undefined);
  const complaints: string[] = [];
  children.onHopeless = (complaint) => complaints.push(complaint);
  children.start({ name: 'broken', args: ['--eval', 'process.exit(3)'], environment: {} });
  await until(() => complaints.length > 0, 'the complaint');
  expect(complaints[0]).toMatch(/broken ended \(code 3\) again and again/);
  await children.stop();
});

test('what a process prints is in its log, errors too, and a large log is set aside', async () => {
  const logs = path.join(folder, 'logs');
  const children = new Children(PROJECT, logs, () => undefined);
  const file = path.join(logs, 'talker.log');
  writeFileSync(file, Buffer.alloc(5 * 1024 * 1024 + 1));
  children.start({
    name: 'talker',
    args: [
      '--eval',
      'console.log("hello", process.env.GIVEN, process.env.SECRET); setInterval(() => {}, 1000)',
    ],
    environment: { GIVEN: 'this' },
  });
  await until(() => readFileSync(file, 'utf8').includes('\n'), 'a line in the log');
  await children.stop();
  expect(readFileSync(file, 'utf8')).toBe('hello this undefined\n');
  expect(statSync(`${file}.old`).size).toBe(5 * 1024 * 1024 + 1);
});
