import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { startEntry } from '@/db/commands/entry/start-entry';
import type { Actor } from '@/db/policies/may';
import { getEntryPage } from '@/db/queries/entry/get-entry-page';
import { listEntries } from '@/db/queries/entry/list-entries';
import { listRecentEntries } from '@/db/queries/entry/list-recent-entries';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import { makeEntry, makeLab, makeMember, makeNotebook, makePerson } from '../../../helpers/factories';

let database: TestDatabase;
let owner: Actor;
let reader: Actor;
let outsider: Actor;
let notebookId: string;
let first: string;

beforeAll(async () => {
  database = await createTestDatabase();
  await makeLab(database.app);
  owner = await makePerson(database.app, { name: 'Olga Owner' });
  reader = await makePerson(database.app, { role: 'guest' });
  outsider = await makePerson(database.app, { role: 'pi', admin: true });
  notebookId = (await makeNotebook(database.app, owner, { code: 'TRB', members: [[reader, 'reader']] })).id;
  first = await makeEntry(database.app, notebookId, owner, {
    title: 'First day',
    experimentDate: '2026-03-02',
  });
  for (let i = 2; i <= 7; i += 1) await makeEntry(database.app, notebookId, owner, { title: `Day ${i}` });
  for (const [position, verdict, d] of [
    [2, 'undecided', null],
    [1, 'free', 0.43],
    [3, 'directed', 0.2],
    [4, 'free', 0.1],
  ] as const) {
    await database.app.execute(sql`INSERT INTO block_result
      (entry_id, notebook_id, block_id, position, reading_ids, settings, status, verdict, d, d_lo, d_hi)
      VALUES (${first}, ${notebookId}, ${`b${position}`}, ${position}, '{}', '{}', 'done', ${verdict}, ${d}, ${d}, ${d})`);
  }
  await database.app
    .execute(sql`INSERT INTO block_result (entry_id, notebook_id, block_id, position, reading_ids, settings, status)
    VALUES (${first}, ${notebookId}, 'b5', 5, '{}', '{}', 'waiting')`);
});
afterAll(() => database.drop());

describe('the ledger of a notebook', () => {
  test('newest number first, in pages that neither repeat nor hide', async () => {
    const numbers: number[] = [];
    let before: number | null = null;
    let pages = 0;
    do {
      const page: Awaited<ReturnType<typeof listEntries>> = await listEntries(database.app, reader, {
        notebookId,
        before,
        limit: 3,
      });
      numbers.push(...page.entries.map(({ number }) => number));
      before = page.next;
      pages += 1;
    } while (before !== null);
    expect(numbers).toEqual([7, 6, 5, 4, 3, 2, 1]);
    expect(pages).toBe(3);
  });

  test('a line carries people, date, state and the first results in the order of the blocks', async () => {
    const { entries } = await listEntries(database.app, owner, { notebookId, before: 2 });
    expect(entries).toEqual([
      {
        id: first,
        notebookCode: 'TRB',
        number: 1,
        title: 'First day',
        experimentDate: '2026-03-02',
        state: 'draft',
        people: ['Olga Owner'],
        results: [
          { blockId: 'b1', verdict: 'free', d: 0.43, lo: 0.43, hi: 0.43 },
          { blockId: 'b2', verdict: 'undecided', d: null, lo: null, hi: null },
          { blockId: 'b3', verdict: 'directed', d: 0.2, lo: 0.2, hi: 0.2 },
        ],
        resultCount: 4,
      },
    ]);
  });

  test('an outsider, also an admin, gets an empty list; so does somebody just deactivated', async () => {
    expect(await listEntries(database.app, outsider, { notebookId, before: null })).toEqual({
      entries: [],
      next: null,
    });
    const leaver = await makePerson(database.app);
    await makeMember(database.app, notebookId, leaver, 'reader');
    expect((await listEntries(database.app, leaver, { notebookId, before: null })).entries).not.toEqual([]);
    await database.app.execute(sql`UPDATE person SET active = false WHERE id = ${leaver.personId}`);
    expect((await listEntries(database.app, leaver, { notebookId, before: null })).entries).toEqual([]);
  });
});

describe('what somebody works on', () => {
  test('my drafts are those that I started or wrote in; the others’ are the rest that I may read', async () => {
    const editor = await makePerson(database.app, { name: 'Edo Editor' });
    await makeMember(database.app, notebookId, editor, 'editor');
    const mine = await startEntry(database.app, editor, { notebookId });
    await database.app.execute(sql`SELECT register_client(${first}, 1, 77, ${editor.personId})`);
    const list = async (actor: Actor, whose: 'mine' | 'others') =>
      (await listRecentEntries(database.app, actor, { whose, limit: 50 })).map(({ id }) => id);

    // A client id alone, as every reader's browser claims one, is no edit.
    expect(await list(editor, 'mine')).toEqual([mine.entryId]);
    await database.app
      .execute(sql`SELECT * FROM append_updates(${first}, 0, 1, ${editor.personId}, ${editor.loginId},
      ${crypto.randomUUID()}, ARRAY[77]::bigint[], ARRAY['\\x01'::bytea])`);
    expect(await list(editor, 'mine')).toEqual([first, mine.entryId]);
    expect(await list(editor, 'others')).not.toContain(first);
    expect(await list(editor, 'others')).toHaveLength(6);
    expect((await getEntryPage(database.app, reader, first)).people).toEqual(['Olga Owner', 'Edo Editor']);

    await database.owner.execute(sql`UPDATE entry SET state = 'signed' WHERE id = ${mine.entryId}`);
    expect(await list(editor, 'mine')).toEqual([first]);
  });

  test('an outsider has nothing in either list', async () => {
    for (const whose of ['mine', 'others'] as const) {
      expect(await listRecentEntries(database.app, outsider, { whose, limit: 50 })).toEqual([]);
    }
  });
});

describe('one entry', () => {
  test('a reader sees it and is told that they may not write', async () => {
    expect(await getEntryPage(database.app, reader, first)).toMatchObject({
      title: 'First day',
      startedBy: 'Olga Owner',
      may: { write: false, attach: false },
    });
  });

  test('to an outsider it does not exist', async () => {
    await expect(getEntryPage(database.app, outsider, first)).rejects.toMatchObject({ code: 'not-found' });
    await expect(getEntryPage(database.app, owner, crypto.randomUUID())).rejects.toMatchObject({
      code: 'not-found',
    });
  });
});
