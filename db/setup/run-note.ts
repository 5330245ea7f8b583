import { existsSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';

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
  if (!existsSync(file(folder))) return null;
  return JSON.parse(readFileSync(file(folder), 'utf8')) as RunNote;
}

/** Whether a pid still belongs to a process of this project; pids are given anew to strangers. */
export function isOurs(pid: number, project: string): boolean {
  try {
    const command = readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ');
    return command.includes(`${project}${path.sep}`) || command.startsWith('next-server');
  } catch {
    return false;
  }
}

/** Ends what an earlier start that was killed may have left running. */
export async function endOrphans(folder: string, project: string): Promise<void> {
  const note = findRunNote(folder);
  if (!note) return;
  const orphans = Object.values(note.children).filter((pid) => pid > 0 && isOurs(pid, project));
  for (const pid of orphans) process.kill(pid, 'SIGKILL');
  while (orphans.some((pid) => isOurs(pid, project))) await new Promise((resolve) => setTimeout(resolve, 50));
  removeRunNote(folder);
}
