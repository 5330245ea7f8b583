import { createHash } from 'node:crypto';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { inspectFile } from '../../../../analysis/intake/inspect-file';
import { readTrajectories } from '../../../../analysis/intake/read-trajectories';
import type { ReadingSpec } from '../../../../analysis/intake/types';
import { makeReading } from '../../../../db/commands/file/make-reading';
import { AppError } from '../../../../db/errors';
import type { Actor } from '../../../../db/policies/may';
import { audit, reading } from '../../../../db/schema/index';
import { createTestDatabase, warmUp, type TestDatabase } from '../../../helpers/database';
import { makeAttachment, makeEntry, makeMember, makeNotebook, makePerson } from '../../../helpers/factories';
import { golden } from '../../../ws-server/projector/world';

/** Readings: made by those who may write, never changed, and the same for the same file read the same way (rule 2.2a). */
let database: TestDatabase;
let owner: Actor;
let notebookId: string;
let entryId: string;
let attachmentId: string;

const bytes = golden('g14_short.csv');
const SHA256 = createHash('sha256').update(bytes).digest('hex');
const inspection = inspectFile(bytes, 'short.csv');
if (inspection.failed) throw new Error(inspection.message);
const { spec } = inspection;
const read = readTrajectories(bytes, spec);
if (read.failed) throw new Error(read.message);
const { summary } = read;

beforeAll(async () => {
  database = await createTestDatabase();
  owner = await makePerson(database.app);
});
afterAll(() => database.drop());
beforeEach(async () => {
  notebookId = (await makeNotebook(database.app, owner)).id;
  entryId = await makeEntry(database.app, notebookId, owner);
  attachmentId = await makeAttachment(database.app, entryId, owner, { sha256: SHA256 });
});

const make = (actor: Actor, more: { attachmentId?: string; spec?: ReadingSpec; problems?: number } = {}) =>
  makeReading(database.app, actor, { attachmentId, spec, summary, problems: 0, ...more });
const rows = () => database.app.select().from(reading).where(eq(reading.attachmentId, attachmentId));
async function codeOf(run: Promise<unknown>): Promise<string> {
  return run.then(
    () => 'done',
    (error: unknown) => (error instanceof AppError ? error.code : String(error)),
  );
}

describe('who', () => {
  test('those who write the entry, as long as it is a draft', async () => {
    const roles = ['editor', 'reader', 'witness'] as const;
    const answers: Record<string, string> = {};
    for (const role of roles) {
      const actor = await makePerson(database.app);
      await makeMember(database.app, notebookId, actor, role);
      answers[role] = await codeOf(make(actor));
    }
    const guest = await makePerson(database.app, { role: 'guest' });
    await makeMember(database.app, notebookId, guest, 'editor');
    answers.guest = await codeOf(make(guest));
    answers.outsider = await codeOf(make(await makePerson(database.app, { role: 'pi', admin: true })));
    expect(answers).toEqual({
      editor: 'done',
      reader: 'forbidden',
      witness: 'forbidden',
      guest: 'forbidden',
      outsider: 'not-found',
    });
    await database.owner.execute(sql`UPDATE entry SET state = 'closing' WHERE id = ${entryId}`);
    expect(await codeOf(make(owner))).toBe('locked');
    expect(await rows()).toHaveLength(1);
  });

  test('a file of an entry that I may not write, or may not see, is not read by me', async () => {
    const other = await makePerson(database.app);
    const theirs = (await makeNotebook(database.app, other)).id;
    const theirEntry = await makeEntry(database.app, theirs, other);
    const theirFile = await makeAttachment(database.app, theirEntry, other, { sha256: SHA256 });
    expect(await codeOf(make(owner, { attachmentId: theirFile }))).toBe('not-found');
    await makeMember(database.app, theirs, owner, 'reader');
    expect(await codeOf(make(owner, { attachmentId: theirFile }))).toBe('forbidden');
    expect(await codeOf(make(owner, { attachmentId: crypto.randomUUID() }))).toBe('not-found');
  });
});

describe('what', () => {
  test('keeps how the file is read, what was found, the rows that could not be used, and who said so', async () => {
    const { readingId, hash } = await make(owner, { problems: 3 });
    const [row] = await rows();
    expect(row).toMatchObject({ id: readingId, hash, spec, summary, problems: 3, personId: owner.personId });
    const log = await database.app.select().from(audit).where(eq(audit.subject, readingId));
    expect(log).toMatchObject([{ kind: 'reading.create', personId: owner.personId, entryId }]);
    expect(log[0]?.after).toEqual({ attachment: attachmentId, hash });
  });

  test('the same way is the same reading, confirmed by whomever, however often, also at the same moment', async () => {
    const editor = await makePerson(database.app);
    await makeMember(database.app, notebookId, editor, 'editor');
    const both = [owner, editor];
    await warmUp(database.app, 6);
    const made = await Promise.all(Array.from({ length: 6 }, (_, i) => make(both[i % 2]!)));
    for (const one of made) expect(one).toEqual(made[0]);
    // The order in which a browser lists the parts of a reading says nothing (RFC 8785 sorts them).
    const shuffled = Object.fromEntries(Object.entries(spec).reverse()) as unknown as ReadingSpec;
    expect(await make(owner, { spec: shuffled })).toEqual(made[0]);
    expect(await rows()).toHaveLength(1);
    const log = await database.app.select().from(audit).where(eq(audit.subject, made[0]!.readingId));
    expect(log).toHaveLength(1);
  });

  test('its hash follows from bytes and way alone: the same in another entry, another for anything else', async () => {
    const here = await make(owner);
    const otherEntry = await makeEntry(database.app, notebookId, owner);
    const again = await makeAttachment(database.app, otherEntry, owner, {
      name: 'other name.csv',
      sha256: SHA256,
    });
    const there = await make(owner, { attachmentId: again });
    expect(there.hash).toBe(here.hash);
    expect(there.readingId).not.toBe(here.readingId);

    const hashes = new Set([here.hash]);
    const others: ReadingSpec[] = [
      { ...spec, exposure: { fraction: '1' } },
      { ...spec, exposure: { seconds: '1' } },
      { ...spec, frameInterval: '0.020' },
      { ...spec, pixelSize: '0.1' },
      { ...spec, units: { ...spec.units, x: 'nm' } },
      { ...spec, columns: { ...spec.columns, y: null } },
      { ...spec, dialect: { ...spec.dialect, firstDataLine: spec.dialect.firstDataLine + 1 } },
    ];
    for (const one of others) hashes.add((await make(owner, { spec: one })).hash);
    const otherBytes = await makeAttachment(database.app, entryId, owner, { sha256: 'b'.repeat(64) });
    hashes.add((await make(owner, { attachmentId: otherBytes })).hash);
    expect(hashes.size).toBe(others.length + 2);
  });

  test('its hash can be found again without this program', async () => {
    // RFC 8785 for text, whole numbers and null: JSON without blanks, names sorted. Written here a second time.
    const canonical = (value: unknown): string =>
      value !== null && typeof value === 'object'
        ? `{${Object.entries(value)
            .sort(([a], [b]) => (a < b ? -1 : 1))
            .map(([name, part]) => `${JSON.stringify(name)}:${canonical(part)}`)
            .join(',')}}`
        : JSON.stringify(value);
    const text = canonical({ type: 'motebook/reading/1', file: SHA256, spec });
    expect((await make(owner)).hash).toBe(createHash('sha256').update(text).digest('hex'));
  });

  test('no role of the running product can change or remove it', async () => {
    const { readingId } = await make(owner);
    for (const db of [database.app, database.ws]) {
      for (const statement of [
        sql`UPDATE reading SET spec = '{}' WHERE id = ${readingId}`,
        sql`UPDATE reading SET problems = 0 WHERE id = ${readingId}`,
        sql`DELETE FROM reading WHERE id = ${readingId}`,
        sql`DELETE FROM attachment WHERE id = ${attachmentId}`,
      ]) {
        await expect(db.execute(statement)).rejects.toMatchObject({
          cause: { message: expect.stringMatching(/permission denied|insert-only/) },
        });
      }
    }
    expect(await rows()).toMatchObject([{ id: readingId, spec }]);
  });
});
