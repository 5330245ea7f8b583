import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { startEntry } from '@/db/commands/entry/start-entry';
import { createNotebook } from '@/db/commands/notebook/create-notebook';
import type { Actor } from '@/db/policies/may';
import { findLab } from '@/db/queries/lab/find-lab';
import { getLab } from '@/db/queries/lab/get-lab';
import { hasPerson } from '@/db/queries/lab/has-person';
import { getNotebook } from '@/db/queries/notebook/get-notebook';
import { listNotebooks } from '@/db/queries/notebook/list-notebooks';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import { makeLab, makeNotebook, makePerson } from '../../../helpers/factories';

let database: TestDatabase;
let pi: Actor;
beforeAll(async () => {
  database = await createTestDatabase();
  expect(await findLab(database.app)).toBeNull();
  await expect(getLab(database.app)).rejects.toMatchObject({
    sentence: expect.stringContaining('add-person'),
  });
  await makeLab(database.app);
  pi = await makePerson(database.app, { role: 'pi', name: 'Petra Leader' });
});
afterAll(() => database.drop());

describe('making a notebook', () => {
  const input = { code: 'BRM', title: 'Bead runs', description: 'Daily checks' };

  test('its maker owns it, and the audit says who made it', async () => {
    const { notebookId } = await createNotebook(database.app, pi, input);
    expect(await getNotebook(database.app, pi, notebookId)).toEqual({
      id: notebookId,
      ...input,
      archived: false,
      role: 'owner',
      members: [{ name: 'Petra Leader', role: 'owner' }],
      entryCount: 0,
      newestDate: null,
      todays: null,
      may: { startEntry: true },
    });
    const { rows } = await database.owner.execute(
      sql`SELECT kind, person_id FROM audit WHERE notebook_id = ${notebookId}`,
    );
    expect(rows).toEqual([{ kind: 'notebook.create', person_id: pi.personId }]);
  });

  test('a code that is taken is refused beside its field, and nothing is made', async () => {
    await expect(createNotebook(database.app, pi, { ...input, title: 'Again' })).rejects.toMatchObject({
      code: 'bad-input',
      fields: { code: expect.stringContaining('BRM') },
    });
    expect((await listNotebooks(database.app, pi)).map(({ title }) => title)).not.toContain('Again');
  });

  test.each([
    ['a researcher', { role: 'researcher' }, false],
    ['a guest with the admin flag', { role: 'guest', admin: true }, false],
    ['an admin', { role: 'researcher', admin: true }, true],
  ] as const)('%s', async (_who, given, allowed) => {
    const actor = await makePerson(database.app, given);
    const made = createNotebook(database.app, actor, {
      ...input,
      code: `X${given.role === 'guest' ? 1 : 2}${allowed ? 1 : 0}`,
    });
    if (allowed) await expect(made).resolves.toMatchObject({ notebookId: expect.any(String) });
    else await expect(made).rejects.toMatchObject({ code: 'forbidden' });
  });
});

describe('the list of notebooks', () => {
  test('holds what I belong to and no more; the one I wrote in last comes first, archived ones last', async () => {
    const editor = await makePerson(database.app);
    const [older, newer, archived] = [
      await makeNotebook(database.app, pi, { members: [[editor, 'editor']] }),
      await makeNotebook(database.app, pi, { members: [[editor, 'editor']] }),
      await makeNotebook(database.app, pi, { members: [[editor, 'editor']] }),
    ];
    await makeNotebook(database.app, pi);
    await database.app.execute(
      sql`UPDATE notebook SET archived_at = motebook_now() WHERE id = ${archived.id}`,
    );
    await startEntry(database.app, editor, { notebookId: older.id });
    const mine = await startEntry(database.app, editor, { notebookId: newer.id });

    const list = await listNotebooks(database.app, editor);
    expect(list.map(({ id }) => id)).toEqual([newer.id, older.id, archived.id]);
    expect(list.map(({ may }) => may.startEntry)).toEqual([true, true, false]);
    expect(list[0]).toMatchObject({ entryCount: 1, todays: { id: mine.entryId, number: 1 }, role: 'editor' });
    // Somebody else's entry of today is not mine to continue.
    expect((await getNotebook(database.app, pi, newer.id)).todays).toBeNull();
  });

  test('a guest reads what is shared and starts nothing', async () => {
    const guest = await makePerson(database.app, { role: 'guest' });
    const shared = await makeNotebook(database.app, pi, { members: [[guest, 'reader']] });
    const list = await listNotebooks(database.app, guest);
    expect(list.map(({ id, may }) => [id, may.startEntry])).toEqual([[shared.id, false]]);
  });

  test('an outsider has none, and cannot open one by its id', async () => {
    const outsider = await makePerson(database.app, { role: 'pi', admin: true });
    const notebook = await makeNotebook(database.app, pi);
    expect(await listNotebooks(database.app, outsider)).toEqual([]);
    await expect(getNotebook(database.app, outsider, notebook.id)).rejects.toMatchObject({
      code: 'not-found',
    });
  });
});

test('demo accounts are offered only where they exist', async () => {
  const someone = await makePerson(database.app);
  expect(await hasPerson(database.app, someone.login)).toBe(true);
  expect(await hasPerson(database.app, 'nobody-here')).toBe(false);
});
