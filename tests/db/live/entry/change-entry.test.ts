import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { renameEntry } from '@/db/commands/entry/rename-entry';
import { setExperimentDate } from '@/db/commands/entry/set-experiment-date';
import type { Actor } from '@/db/policies/may';
import { getEntryPage } from '@/db/queries/entry/get-entry-page';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import { makeEntry, makeLab, makeNotebook, makePerson } from '../../../helpers/factories';

let database: TestDatabase;
let owner: Actor;
let editor: Actor;
let reader: Actor;
let guest: Actor;
let outsider: Actor;
let entryId: string;

beforeAll(async () => {
  database = await createTestDatabase();
  await makeLab(database.app);
  owner = await makePerson(database.app);
  editor = await makePerson(database.app);
  reader = await makePerson(database.app);
  guest = await makePerson(database.app, { role: 'guest' });
  outsider = await makePerson(database.app, { role: 'pi', admin: true });
});
beforeEach(async () => {
  const notebook = await makeNotebook(database.app, owner, {
    members: [
      [editor, 'editor'],
      [reader, 'reader'],
      [guest, 'editor'],
    ],
  });
  entryId = await makeEntry(database.app, notebook.id, owner, {
    title: 'A day',
    experimentDate: '2026-03-02',
  });
});
afterAll(() => database.drop());

const audits = async () =>
  (
    await database.owner.execute(
      sql`SELECT kind, person_id, before, after FROM audit WHERE entry_id = ${entryId} ORDER BY id`,
    )
  ).rows;

const changes = {
  title: (actor: Actor, value = 'Another day') => renameEntry(database.app, actor, { entryId, title: value }),
  date: (actor: Actor, value = '2026-03-03') =>
    setExperimentDate(database.app, actor, { entryId, experimentDate: value }),
};

describe.each(['title', 'date'] as const)('changing the %s', (what) => {
  test('an editor may; the audit keeps what was there', async () => {
    await changes[what](editor);
    const page = await getEntryPage(database.app, reader, entryId);
    expect(what === 'title' ? page.title : page.experimentDate).toBe(
      what === 'title' ? 'Another day' : '2026-03-03',
    );
    expect(await audits()).toEqual([
      what === 'title'
        ? {
            kind: 'entry.rename',
            person_id: editor.personId,
            before: { title: 'A day' },
            after: { title: 'Another day' },
          }
        : {
            kind: 'entry.date',
            person_id: editor.personId,
            before: { experimentDate: '2026-03-02' },
            after: { experimentDate: '2026-03-03' },
          },
    ]);
  });

  test('a reader and a guest may not, an outsider finds nothing; nothing changes', async () => {
    await expect(changes[what](reader)).rejects.toMatchObject({ code: 'forbidden' });
    await expect(changes[what](guest)).rejects.toMatchObject({ code: 'forbidden' });
    await expect(changes[what](outsider)).rejects.toMatchObject({ code: 'not-found' });
    await expect(changes[what]({ ...owner, active: false })).rejects.toMatchObject({ code: 'not-found' });
    expect(await audits()).toEqual([]);
    expect(await getEntryPage(database.app, owner, entryId)).toMatchObject({
      title: 'A day',
      experimentDate: '2026-03-02',
    });
  });

  test('an entry that is no longer a draft is locked', async () => {
    await database.owner.execute(sql`UPDATE entry SET state = 'closing' WHERE id = ${entryId}`);
    await expect(changes[what](owner)).rejects.toMatchObject({ code: 'locked' });
  });

  test('the same value again records nothing', async () => {
    await changes[what](owner, what === 'title' ? 'A day' : '2026-03-02');
    expect(await audits()).toEqual([]);
  });

  test('of two at the same moment one wins, and the trail leads from the first value to the last', async () => {
    const values = what === 'title' ? ['By the owner', 'By the editor'] : ['2026-04-01', '2026-04-02'];
    await Promise.all([changes[what](owner, values[0]), changes[what](editor, values[1])]);
    const [first, second] = (await audits()) as { before: object; after: object }[];
    expect(second?.before).toEqual(first?.after);
    const page = await getEntryPage(database.app, owner, entryId);
    expect(Object.values(second?.after ?? {})).toEqual([what === 'title' ? page.title : page.experimentDate]);
  });
});

test('open pages are told of a new title', async () => {
  const listener = await database.ws.$client.connect();
  try {
    await listener.query('LISTEN motebook_entry');
    const told = new Promise((resolve) =>
      listener.once('notification', (message) => resolve(message.payload)),
    );
    await changes.title(editor);
    expect(await told).toBe(entryId);
  } finally {
    listener.release(true);
  }
});
