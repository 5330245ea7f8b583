import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { startEntry } from '@/db/commands/entry/start-entry';
import { setExperimentDate } from '@/db/commands/entry/set-experiment-date';
import type { Actor } from '@/db/policies/may';
import { findTodaysEntry } from '@/db/queries/entry/find-todays-entry';
import { getEntryPage } from '@/db/queries/entry/get-entry-page';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import { makeLab, makeNotebook, makePerson } from '../../../helpers/factories';

let database: TestDatabase;
let owner: Actor;
beforeAll(async () => {
  database = await createTestDatabase();
  await makeLab(database.app);
  owner = await makePerson(database.app, { name: 'Owner of all' });
});
afterAll(() => database.drop());

const start = (actor: Actor, notebookId: string) => startEntry(database.app, actor, { notebookId });

describe('starting today’s entry', () => {
  test('makes a draft with the next number, the lab’s day, a first paragraph and an audit row', async () => {
    const notebook = await makeNotebook(database.app, owner, { code: 'TRB' });
    const made = await start(owner, notebook.id);
    expect(made).toMatchObject({ number: 1, started: true });

    const page = await getEntryPage(database.app, owner, made.entryId);
    const { rows: days } = await database.owner.execute<{ day: string }>(
      sql`SELECT (motebook_now() AT TIME ZONE 'Europe/Berlin')::date::text AS day`,
    );
    expect(page).toMatchObject({
      notebookCode: 'TRB',
      number: 1,
      title: '',
      state: 'draft',
      epoch: 1,
      experimentDate: days[0]?.day,
      people: ['Owner of all'],
      may: { write: true, attach: true },
    });
    const { rows: seeds } = await database.owner.execute(
      sql`SELECT seq, person_id, login_id FROM entry_update WHERE entry_id = ${made.entryId}`,
    );
    expect(seeds).toEqual([{ seq: 1, person_id: owner.personId, login_id: owner.loginId }]);
    const { rows: audits } = await database.owner.execute(
      sql`SELECT kind, person_id, login_id, after FROM audit WHERE entry_id = ${made.entryId}`,
    );
    expect(audits).toEqual([
      {
        kind: 'entry.start',
        person_id: owner.personId,
        login_id: owner.loginId,
        after: { number: 1, experimentDate: days[0]?.day },
      },
    ]);
  });

  test('asked again, it opens mine; somebody else’s is another', async () => {
    const editor = await makePerson(database.app);
    const notebook = await makeNotebook(database.app, owner, { members: [[editor, 'editor']] });
    const first = await start(editor, notebook.id);
    const again = await start(editor, notebook.id);
    expect(again).toEqual({ entryId: first.entryId, number: 1, started: false });
    expect(await findTodaysEntry(database.app, editor, notebook.id)).toEqual({
      id: first.entryId,
      number: 1,
    });
    expect(await findTodaysEntry(database.app, owner, notebook.id)).toBeNull();
    expect(await start(owner, notebook.id)).toMatchObject({ number: 2, started: true });
  });

  test('an entry of mine that is dated to another day is not today’s', async () => {
    const notebook = await makeNotebook(database.app, owner);
    const first = await start(owner, notebook.id);
    await setExperimentDate(database.app, owner, { entryId: first.entryId, experimentDate: '2024-02-29' });
    expect(await start(owner, notebook.id)).toMatchObject({ number: 2, started: true });
  });

  test('twenty clicks at the same moment by ten people make ten entries with gap-free numbers', async () => {
    const people = await Promise.all(Array.from({ length: 10 }, () => makePerson(database.app)));
    const notebook = await makeNotebook(database.app, owner, {
      members: people.map((person) => [person, 'editor']),
    });
    const made = await Promise.all([...people, ...people].map((person) => start(person, notebook.id)));
    expect(made.filter(({ started }) => started)).toHaveLength(10);
    expect([...new Set(made.map(({ number }) => number))].sort((a, b) => a - b)).toEqual([
      1, 2, 3, 4, 5, 6, 7, 8, 9, 10,
    ]);
    for (const person of people.keys()) expect(made[person]?.entryId).toBe(made[person + 10]?.entryId);
  });

  test('a failure on the way leaves nothing, not even a used number', async () => {
    const notebook = await makeNotebook(database.app, owner);
    // A login that was ended between the click and the write: append_updates refuses, the transaction is undone.
    const gone = { ...owner, loginId: '00000000-0000-4000-8000-000000000000' };
    await expect(start(gone, notebook.id)).rejects.toThrow();
    expect(await start(owner, notebook.id)).toMatchObject({ number: 1, started: true });
  });
});

describe('who may', () => {
  test('an outsider is told what somebody is told who made the id up', async () => {
    const notebook = await makeNotebook(database.app, owner);
    const outsider = await makePerson(database.app, { role: 'pi', admin: true });
    await expect(start(outsider, notebook.id)).rejects.toMatchObject({ code: 'not-found' });
    await expect(start(outsider, crypto.randomUUID())).rejects.toMatchObject({ code: 'not-found' });
  });

  test.each(['reader', 'witness'] as const)('a %s may read but not start', async (role) => {
    const member = await makePerson(database.app);
    const notebook = await makeNotebook(database.app, owner, { members: [[member, role]] });
    await expect(start(member, notebook.id)).rejects.toMatchObject({ code: 'forbidden' });
  });

  test('a guest may not, even where somebody made them an editor', async () => {
    const guest = await makePerson(database.app, { role: 'guest' });
    const notebook = await makeNotebook(database.app, owner, { members: [[guest, 'editor']] });
    await expect(start(guest, notebook.id)).rejects.toMatchObject({ code: 'forbidden' });
  });

  test('nobody starts an entry in an archived notebook, and the refusal says so', async () => {
    const notebook = await makeNotebook(database.app, owner);
    await database.app.execute(
      sql`UPDATE notebook SET archived_at = motebook_now() WHERE id = ${notebook.id}`,
    );
    await expect(start(owner, notebook.id)).rejects.toMatchObject({
      code: 'forbidden',
      sentence: expect.stringContaining('archived'),
    });
  });

  test('a deactivated person may not', async () => {
    const notebook = await makeNotebook(database.app, owner);
    await expect(start({ ...owner, active: false }, notebook.id)).rejects.toMatchObject({
      code: 'not-found',
    });
  });
});
