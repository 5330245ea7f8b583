import { randomUUID } from 'node:crypto';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { finishUpload } from '../../../../db/commands/file/finish-upload';
import { startUpload } from '../../../../db/commands/file/start-upload';
import { AppError } from '../../../../db/errors';
import type { Actor } from '../../../../db/policies/may';
import { listAttachments } from '../../../../db/queries/file/list-attachments';
import { attachment, audit, uploadTicket } from '../../../../db/schema/index';
import { createTestDatabase, warmUp, type TestDatabase } from '../../../helpers/database';
import { makeEntry, makeMember, makeNotebook, makePerson } from '../../../helpers/factories';

/** Uploads as the database sees them: a ticket, then an attachment, whoever says what in between (rules U2, U6, S45). */
let database: TestDatabase;
let owner: Actor;
let notebookId: string;
let entryId: string;
beforeAll(async () => {
  database = await createTestDatabase();
  owner = await makePerson(database.app);
});
afterAll(() => database.drop());
beforeEach(async () => {
  notebookId = (await makeNotebook(database.app, owner)).id;
  entryId = await makeEntry(database.app, notebookId, owner);
});

const HASH = 'ab'.repeat(32);
const start = (actor: Actor, name = 'tracks.csv', bytes = 100) =>
  startUpload(database.app, actor, { entryId, name, bytes });
const finish = (ticketId: string, more: Partial<Parameters<typeof finishUpload>[1]> = {}) =>
  finishUpload(database.app, {
    ticketId,
    storageKey: randomUUID(),
    mediaType: 'application/octet-stream',
    bytes: 100,
    sha256: HASH,
    ...more,
  });
const rows = () => database.app.select().from(attachment).where(eq(attachment.entryId, entryId));
async function codeOf(run: Promise<unknown>): Promise<string> {
  return run.then(
    () => 'done',
    (error: unknown) => (error instanceof AppError ? error.code : String(error)),
  );
}
async function member(role: 'editor' | 'reader' | 'witness', person = {}): Promise<Actor> {
  const actor = await makePerson(database.app, person);
  await makeMember(database.app, notebookId, actor, role);
  return actor;
}

describe('starting', () => {
  test('those who write the notebook may; no one else gets a ticket', async () => {
    expect(await codeOf(start(owner))).toBe('done');
    expect(await codeOf(start(await member('editor')))).toBe('done');
    expect(await codeOf(start(await member('reader')))).toBe('forbidden');
    expect(await codeOf(start(await member('witness')))).toBe('forbidden');
    expect(await codeOf(start(await member('editor', { role: 'guest' })))).toBe('forbidden');
    expect(await codeOf(start(await makePerson(database.app, { role: 'pi', admin: true })))).toBe(
      'not-found',
    );
    expect(await codeOf(start(await member('editor', { active: false })))).toBe('not-found');
    const tickets = await database.app.select().from(uploadTicket).where(eq(uploadTicket.entryId, entryId));
    expect(tickets).toHaveLength(2);
  });

  test('an entry that is no draft takes no file', async () => {
    await database.owner.execute(sql`UPDATE entry SET state = 'signed' WHERE id = ${entryId}`);
    expect(await codeOf(start(owner))).toBe('locked');
  });
});

describe('finishing', () => {
  test('keeps what was measured, not what was announced, and says who and when', async () => {
    const { ticketId } = await start(owner, 'a/\u202eb.csv', 5);
    const done = await finish(ticketId, { bytes: 77 });
    expect(done).toMatchObject({ name: 'ab.csv', bytes: 77, sha256: HASH });
    expect(await rows()).toMatchObject([{ id: done.attachmentId, bytes: 77, personId: owner.personId }]);
    const log = await database.app.select().from(audit).where(eq(audit.subject, done.attachmentId));
    expect(log).toMatchObject([
      { kind: 'attachment.add', personId: owner.personId, loginId: owner.loginId, entryId },
    ]);
    expect(log[0]?.after).toEqual({ name: 'ab.csv', bytes: 77, sha256: HASH });
  });

  test('told twice of one file, also at the same moment, there is one attachment and one answer', async () => {
    const { ticketId } = await start(owner);
    const storageKey = randomUUID();
    await warmUp(database.app, 5);
    const answers = await Promise.all(Array.from({ length: 5 }, () => finish(ticketId, { storageKey })));
    for (const answer of answers) expect(answer).toEqual(answers[0]);
    expect(await finish(ticketId, { storageKey, bytes: 1, sha256: 'cd'.repeat(32) })).toEqual(answers[0]);
    expect(await rows()).toHaveLength(1);
  });

  test('one ticket is one file; no ticket is none', async () => {
    const { ticketId } = await start(owner);
    await finish(ticketId);
    expect(await codeOf(finish(ticketId))).toBe('forbidden');
    expect(await codeOf(finish(randomUUID()))).toBe('forbidden');
    expect(await rows()).toHaveLength(1);
  });

  test('the key of somebody else’s file does not become mine with a ticket of mine', async () => {
    const storageKey = randomUUID();
    const theirs = await finish((await start(owner)).ticketId, { storageKey });
    const stranger = await makePerson(database.app);
    const other = (await makeNotebook(database.app, stranger)).id;
    const otherEntry = await makeEntry(database.app, other, stranger);
    const mine = await startUpload(database.app, stranger, { entryId: otherEntry, name: 'x.csv', bytes: 1 });
    expect(await codeOf(finish(mine.ticketId, { storageKey }))).toBe('forbidden');
    expect(await listAttachments(database.app, stranger, otherEntry)).toEqual([]);
    expect(await rows()).toMatchObject([{ id: theirs.attachmentId }]);
  });

  test('the same bytes twice are two files with one hash', async () => {
    const one = await finish((await start(owner, 'one.csv')).ticketId);
    const two = await finish((await start(owner, 'two.csv')).ticketId);
    expect(two.attachmentId).not.toBe(one.attachmentId);
    expect((await rows()).map((row) => row.sha256)).toEqual([HASH, HASH]);
  });

  test('who loses the right while the bytes arrive adds nothing; signing out takes nothing back', async () => {
    const editor = await member('editor');
    const tickets = [];
    for (let one = 0; one < 4; one++) tickets.push((await start(editor)).ticketId);
    await database.app.execute(sql`UPDATE login SET ended_at = motebook_now() WHERE id = ${editor.loginId}`);
    expect(await codeOf(finish(tickets[0]!))).toBe('done');

    const setRole = (role: string) =>
      database.app.execute(sql`UPDATE notebook_member SET role = ${role}::member_role
        WHERE notebook_id = ${notebookId} AND person_id = ${editor.personId}`);
    await setRole('reader');
    expect(await codeOf(finish(tickets[1]!))).toBe('forbidden');
    await setRole('editor');
    await database.app.execute(sql`UPDATE person SET active = false WHERE id = ${editor.personId}`);
    expect(await codeOf(finish(tickets[2]!))).toBe('not-found');
    await database.app.execute(sql`UPDATE person SET active = true WHERE id = ${editor.personId}`);
    await database.owner.execute(sql`UPDATE entry SET state = 'signed' WHERE id = ${entryId}`);
    expect(await codeOf(finish(tickets[3]!))).toBe('locked');
    expect(await rows()).toHaveLength(1);
  });

  test('the list of files is for those who may read the entry', async () => {
    await finish((await start(owner, 'one.csv')).ticketId);
    const listed = await listAttachments(database.app, await member('reader'), entryId);
    expect(listed).toMatchObject([{ name: 'one.csv', bytes: 100, sha256: HASH, by: owner.name }]);
    // The key of the file service opens files there, so it stays here.
    expect(Object.keys(listed[0]!)).not.toContain('storageKey');
    const outsider = await makePerson(database.app);
    expect(await codeOf(listAttachments(database.app, outsider, entryId))).toBe('not-found');
  });
});
