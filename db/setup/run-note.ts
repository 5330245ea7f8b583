import { existsSync, readFileSync, readlinkSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { sendSignal } from './send-signal';

/** What a running installation leaves beside its data, so that a later start finds it, or what it left behind. */
export interface RunNote {
  readonly supervisor: number;
  readonly product: string;
  readonly children: Readonly<Record<string, number>>;
}

const file = (folder: string) => path.join(folder, 'run.json');

export function writeRunNote(folder: string, note: RunNote): void {
  writeFileSync(`${file(folder)}.new`, JSON.stringify(note));
  renameSync(`${file(folder)}.new`, file(folder));
}

export function removeRunNote(folder: string): void {
  rmSync(file(folder), { force: true });
}

export function findRunNote(folder: string): RunNote | null {
  return existsSync(file(folder)) ? (JSON.parse(readFileSync(file(folder), 'utf8')) as RunNote) : null;
}

/** Whether a pid still belongs to a process of this project; pids are given anew to strangers. */
export function isOurs(pid: number, project: string): boolean {
  try {
    const command = readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ');
    const named = command.includes(`${project}${path.sep}`) || command.startsWith('next-server');
    return named && readlinkSync(`/proc/${pid}/cwd`) === project;
  } catch {
    return false;
  }
}

/** @throws Error when a start of this project still runs on this folder. */
export function refuseSecondStart(folder: string, project: string): void {
  const note = findRunNote(folder);
  if (!note || !isOurs(note.supervisor, project)) return;
  throw new Error(
    `Motebook already runs from this folder, at ${note.product}. Stop it there with Ctrl-C first (process ${note.supervisor}).`,
  );
}

/** Ends a start that still runs on this folder, politely: it stops everything in order. @throws Error after a minute. */
export async function endRunning(folder: string, project: string): Promise<boolean> {
  const note = findRunNote(folder);
  if (!note || !isOurs(note.supervisor, project)) return false;
  sendSignal(note.supervisor, 'SIGTERM');
  const deadline = Date.now() + 60_000;
  while (isOurs(note.supervisor, project)) {
    if (Date.now() > deadline)
      throw new Error(`The running Motebook (process ${note.supervisor}) does not stop.`);
    await pause(50);
  }
  return true;
}

/** Ends what an earlier start that was killed may have left running. */
export async function endOrphans(folder: string, project: string): Promise<void> {
  const note = findRunNote(folder);
  if (!note) return;
  const orphans = Object.values(note.children).filter((pid) => pid > 0 && isOurs(pid, project));
  // Each leads a group of its own, in which lies what it forked.
  for (const pid of orphans) for (const whom of [-pid, pid]) sendSignal(whom, 'SIGKILL');
  while (orphans.some((pid) => isOurs(pid, project))) await pause(50);
  removeRunNote(folder);
}
