import { createInterface } from 'node:readline/promises';
import { Writable } from 'node:stream';

/**
 * A new password: typed twice and unseen on a terminal, or the first line of what is piped in.
 * @throws Error when the two differ, or nothing was piped in.
 */
export async function readNewPassword(): Promise<string> {
  if (!process.stdin.isTTY) return readPipedLine();
  const first = await ask('Password (at least 15 characters): ');
  const second = await ask('The same again: ');
  if (first !== second) throw new Error('The two passwords differ. Nothing was made; run the command again.');
  return first;
}

async function readPipedLine(): Promise<string> {
  for await (const line of createInterface({ input: process.stdin })) return line;
  throw new Error('No password was given. Pipe it in as one line, or run the command in a terminal.');
}

/** Asks on standard error, so that standard output stays clean, and shows nothing of what is typed. */
async function ask(question: string): Promise<string> {
  process.stderr.write(question);
  const unseen = new Writable({ write: (_chunk, _encoding, done) => done() });
  const reader = createInterface({ input: process.stdin, output: unseen, terminal: true });
  reader.on('SIGINT', () => process.exit(130));
  try {
    return await reader.question('');
  } finally {
    reader.close();
    process.stderr.write('\n');
  }
}
