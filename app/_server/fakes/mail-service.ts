import { randomUUID } from 'node:crypto';
import { mkdirSync } from 'node:fs';
import { rename, rm, writeFile } from 'node:fs/promises';
import path from 'node:path';
import PostalMime from 'postal-mime';
import { SMTPServer } from 'smtp-server';
import { listKeptFiles, type KeptMail } from './mail-store';

const MOST_KEPT = 200;
const MOST_BYTES = 1024 * 1024;

/**
 * The demo's mail server: takes everything, sends nothing on, keeps the newest in a folder, one JSON file a mail.
 * @param options.port - on loopback; 0 for any free one.
 */
export async function startMailService(options: {
  port: number;
  folder: string;
}): Promise<{ port: number; stop(): Promise<void> }> {
  mkdirSync(options.folder, { recursive: true, mode: 0o700 });
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    size: MOST_BYTES,
    onData(stream, session, done) {
      const parts: Buffer[] = [];
      stream.on('data', (part: Buffer) => parts.push(part));
      stream.on('error', done);
      stream.on('end', () => {
        keep(options.folder, Buffer.concat(parts), session.envelope.rcptTo).then(() => done(), done);
      });
    },
  });
  server.on('error', (error) => console.error(`local mail server: ${error.message}`));
  await new Promise<void>((resolve, reject) => {
    server.server.once('error', reject);
    server.listen(options.port, '127.0.0.1', resolve);
  });
  const { port } = server.server.address() as { port: number };
  return { port, stop: () => new Promise((resolve) => server.close(() => resolve())) };
}

async function keep(folder: string, raw: Buffer, to: readonly { address: string }[]): Promise<void> {
  const parsed = await PostalMime.parse(raw);
  const kept: KeptMail = {
    id: randomUUID(),
    at: new Date().toISOString(),
    to: to.map((one) => one.address),
    from: parsed.from?.address ?? '',
    subject: parsed.subject ?? '',
    text: parsed.text ?? '',
  };
  const file = path.join(folder, `${kept.at.replace(/[:.]/g, '-')}-${kept.id}.json`);
  // Whole or not at all: a reader may look at any moment.
  await writeFile(`${file}.part`, JSON.stringify(kept), { mode: 0o600 });
  await rename(`${file}.part`, file);
  for (const old of (await listKeptFiles(folder)).slice(MOST_KEPT))
    await rm(path.join(folder, old), { force: true });
}
