import { readdir, readFile } from 'node:fs/promises';
import path from 'node:path';

export interface KeptMail {
  readonly id: string;
  /** When it came, ISO 8601. */
  readonly at: string;
  readonly to: readonly string[];
  readonly from: string;
  readonly subject: string;
  readonly text: string;
}

/** Newest first; the names begin with the time. */
export async function listKeptFiles(folder: string): Promise<string[]> {
  const names = await readdir(folder).catch(() => []);
  return names
    .filter((name) => name.endsWith('.json'))
    .sort()
    .reverse();
}

/** What the local mail server has kept, newest first. */
export async function readKeptMail(folder: string): Promise<KeptMail[]> {
  const texts = await Promise.all(
    (await listKeptFiles(folder)).map((name) => readFile(path.join(folder, name), 'utf8').catch(() => null)),
  );
  return texts.flatMap((text) => (text === null ? [] : [JSON.parse(text) as KeptMail]));
}
