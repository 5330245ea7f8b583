import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { sql } from 'drizzle-orm';
import { afterAll, afterEach, beforeAll, expect, test } from 'vitest';
import { startMailService } from '../../../app/_server/fakes/mail-service';
import { readKeptMail, type KeptMail } from '../../../app/_server/fakes/mail-store';
import { askReset } from '../../../db/commands/person/ask-reset';
import { invitePerson } from '../../../db/commands/person/invite-person';
import { inviteInput } from '../../../db/inputs/person';
import type { Actor } from '../../../db/policies/may';
import { startMailer, type Mailer } from '../../../ws-server/mail/mailer';
import { smtpSender } from '../../../ws-server/mail/smtp';
import { until } from '../../helpers/collab-clients';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { makeLab, makePerson } from '../../helpers/factories';
import { freePort } from '../../helpers/global-cluster';

/** The outbox, the queue, SMTP and the local mail server together; what a reader gets is what is looked at. */
const ORIGIN = 'http://127.0.0.1:4999';
const FROM = 'Motebook <motebook@lab.example>';

let database: TestDatabase;
let admin: Actor;
let folder: string;
let port: number;
let service: Awaited<ReturnType<typeof startMailService>> | null = null;
let mailer: Mailer | null = null;

beforeAll(async () => {
  database = await createTestDatabase();
  await makeLab(database.app);
  admin = await makePerson(database.app, { admin: true, name: 'Åse Øvergård' });
  folder = mkdtempSync(path.join(tmpdir(), 'motebook-mail-'));
  port = await freePort();
});
afterEach(async () => {
  await mailer?.stop();
  await service?.stop();
  mailer = service = null;
});
afterAll(async () => {
  await database.drop();
  rmSync(folder, { recursive: true, force: true });
});

const startService = async () => (service = await startMailService({ port, folder }));
const startSending = async () =>
  (mailer = await startMailer({
    databaseUrl: database.urls.motebook_app,
    origin: ORIGIN,
    send: smtpSender(`smtp://127.0.0.1:${port}`, FROM),
    pauseSeconds: 1,
    pollSeconds: 0.5,
  }));

let running = 0;
async function invite(name = 'Jörg Ürümqi-Łódź') {
  const login = `new${(running += 1)}`;
  const input = inviteInput.parse({ login, email: `${login}@lab.example`, name, role: 'researcher' });
  const { personId } = await invitePerson(database.app, admin, input);
  return { personId, login, email: input.email };
}

const mailTo = async (address: string) =>
  (await readKeptMail(folder)).filter((kept) => kept.to.includes(address));

async function waitForMail(address: string, count = 1): Promise<KeptMail[]> {
  await until(`${count} mail to ${address}`, async () => (await mailTo(address)).length >= count, 40);
  return mailTo(address);
}

async function outbox(personId: string) {
  const { rows } = await database.app.execute<{ sent: boolean; tries: number; last_fault: string }>(
    sql`SELECT sent_at IS NOT NULL AS sent, tries, last_fault FROM mail WHERE person_id = ${personId}`,
  );
  return rows;
}

test('an invitation says who invites, to what, as whom, and how long the link works; umlauts arrive', async () => {
  await startService();
  await startSending();
  const { login, email } = await invite();
  const [kept] = await waitForMail(email);
  expect(kept?.from).toBe('motebook@lab.example');
  expect(kept?.subject).toBe('Your account for the notebook of the Test group');
  const lines = kept!.text.replaceAll('\r\n', '\n').split('\n\n');
  expect(lines[0]).toBe('Good day Jörg Ürümqi-Łódź,');
  expect(lines[1]).toBe('Åse Øvergård invites you to Motebook, the laboratory notebook of the Test group.');
  expect(lines[2]).toBe(
    `Your login name is ${login}. To choose a password, open this address within seven days:`,
  );
  expect(lines[3]).toMatch(/^http:\/\/127\.0\.0\.1:4999\/set-password#[A-Za-z0-9_-]{43}$/);
});

test('the secret of a link stands nowhere in the database, only its SHA-256 (S09)', async () => {
  await startService();
  await startSending();
  const { personId, email } = await invite();
  const [kept] = await waitForMail(email);
  const secret = /#([A-Za-z0-9_-]{43})/.exec(kept!.text)![1]!;
  const { rows } = await database.owner.execute<{ found: boolean; hash: string }>(sql`
    SELECT secret_hash = sha256(convert_to(${secret}, 'UTF8')) AS found, encode(secret_hash, 'hex') AS hash
    FROM password_link WHERE person_id = ${personId}`);
  expect(rows).toHaveLength(1);
  expect(rows[0]?.found).toBe(true);
  for (const table of ['mail', 'password_link', 'audit', 'person', 'queue.job', 'attempt']) {
    const { rows: all } = await database.owner.$client.query(
      `SELECT count(*)::int AS n FROM ${table} t WHERE t::text LIKE '%' || $1 || '%'`,
      [secret],
    );
    expect([table, all[0].n]).toEqual([table, 0]);
  }
});

test('while the mail server is away nothing waits for it, and the mail is sent when it is back', async () => {
  await startSending();
  const { personId, email } = await invite();
  await until('the first try has failed', async () => ((await outbox(personId))[0]?.tries ?? 0) >= 1, 40);
  const [before] = await outbox(personId);
  expect(before?.sent).toBe(false);
  expect(before?.last_fault).toMatch(/ECONNREFUSED/);
  await startService();
  const all = await waitForMail(email);
  expect(all).toHaveLength(1);
  await until('the outbox knows', async () => (await outbox(personId))[0]?.sent === true);
});

test('letters written while no mail process ran are sent when one starts, each once, also by two processes', async () => {
  const people = [await invite(), await invite(), await invite()];
  await startService();
  await startSending();
  const second = await startMailer({
    databaseUrl: database.urls.motebook_app,
    origin: ORIGIN,
    send: smtpSender(`smtp://127.0.0.1:${port}`, FROM),
    pollSeconds: 0.5,
  });
  try {
    for (const { email } of people) await waitForMail(email);
    for (const { personId } of people)
      await until('all are marked', async () => (await outbox(personId))[0]?.sent === true);
    for (const { email } of people) expect(await mailTo(email)).toHaveLength(1);
  } finally {
    await second.stop();
  }
});

test('a reset for a name that nobody has is dropped; one by address reaches its owner', async () => {
  await startService();
  await startSending();
  const who = await makePerson(database.app, { login: 'forgetful' });
  await askReset(database.app, 'nobody.at.all', '192.0.2.1');
  await askReset(database.app, 'forgetful@lab.example', '192.0.2.1');
  const [kept] = await waitForMail('forgetful@lab.example');
  expect(kept?.subject).toBe('A new password for Motebook');
  expect(kept?.text).toMatch(/for forgetful\. To choose one, open this address within thirty minutes:/);
  await until('the other is dropped', async () => {
    const { rows } = await database.app.execute(
      sql`SELECT 1 FROM mail WHERE details->>'asked' = 'nobody.at.all' AND dropped_at IS NOT NULL AND sent_at IS NULL`,
    );
    return rows.length === 1;
  });
  expect(await outbox(who.personId)).toHaveLength(1);
});

test('a mail server that takes a connection and says nothing is given up', async () => {
  const silent = createServer().listen(0, '127.0.0.1');
  await once(silent, 'listening');
  const { port: silentPort } = silent.address() as { port: number };
  const send = smtpSender(`smtp://127.0.0.1:${silentPort}`, FROM, 200);
  const letter = { id: 'x', to: { name: 'N', address: 'n@lab.example' }, subject: 's', text: 't' };
  try {
    await expect(send(letter)).rejects.toThrow(/timeout|greeting/i);
  } finally {
    silent.close();
  }
});

test('a name with line breaks and header words stays one header (S31)', async () => {
  const { writeLetter } = await import('../../../db/mail/letters');
  const facts = {
    ...{ group: 'A\r\nBcc: all@lab.example', name: 'N', login: 'n', origin: ORIGIN, link: 'l' },
    ...{ inviter: 'I', newAddress: '' },
  };
  expect(writeLetter('invitation', facts).subject).not.toMatch(/[\r\n]/);
});
