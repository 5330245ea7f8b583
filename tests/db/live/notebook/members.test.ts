import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { addMember, changeMember } from '@/db/commands/notebook/change-members';
import { addMemberInput } from '@/db/inputs/notebook';
import type { Actor } from '@/db/policies/may';
import { getNotebook } from '@/db/queries/notebook/get-notebook';
import { listMembers } from '@/db/queries/notebook/list-members';
import { audit, notebookMember } from '@/db/schema/index';
import { createTestDatabase, type TestDatabase } from '../../../helpers/database';
import { makeNotebook, makePerson } from '../../../helpers/factories';

let database: TestDatabase;
let owner: Actor;
let editor: Actor;
let newcomer: Actor;
let guest: Actor;
let outsider: Actor;
let notebookId: string;

beforeAll(async () => {
  database = await createTestDatabase();
  const db = database.app;
  owner = await makePerson(db, { role: 'pi' });
  editor = await makePerson(db);
  newcomer = await makePerson(db, { login: 'newcomer' });
  guest = await makePerson(db, { role: 'guest' });
  outsider = await makePerson(db, { admin: true });
  notebookId = (await makeNotebook(db, owner, { members: [[editor, 'editor']] })).id;
});
afterAll(() => database.drop());

const add = (actor: Actor, who: string, role: 'owner' | 'editor' | 'reader' | 'witness') =>
  addMember(database.app, actor, { notebookId, who, role });
const change = (actor: Actor, who: Actor, role: 'owner' | 'editor' | 'reader' | null) =>
  changeMember(database.app, actor, { notebookId, personId: who.personId, role });
const roleOf = async (who: Actor) => {
  const [row] = await database.app
    .select({ role: notebookMember.role })
    .from(notebookMember)
    .where(and(eq(notebookMember.notebookId, notebookId), eq(notebookMember.personId, who.personId)));
  return row?.role ?? null;
};

describe('members are changed by owners only', () => {
  test('not by those who write, nor by an administrator who does not belong to it', async () => {
    await expect(add(editor, 'newcomer', 'reader')).rejects.toMatchObject({ code: 'forbidden' });
    await expect(add(outsider, 'newcomer', 'reader')).rejects.toMatchObject({ code: 'not-found' });
    await expect(change(editor, owner, 'reader')).rejects.toMatchObject({ code: 'forbidden' });
    expect(await listMembers(database.app, editor, notebookId)).toBeNull();
    expect(await listMembers(database.app, outsider, notebookId)).toBeNull();
    expect((await listMembers(database.app, owner, notebookId))?.map(({ role }) => role).sort()).toEqual([
      'editor',
      'owner',
    ]);
  });
});

describe('adding', () => {
  test('by login name or address; then the notebook is there for them, and the audit says so', async () => {
    await expect(getNotebook(database.app, newcomer, notebookId)).rejects.toMatchObject({
      code: 'not-found',
    });
    const input = addMemberInput.parse({ notebookId, who: '  NEWCOMER@lab.example ', role: 'editor' });
    await addMember(database.app, owner, input);
    expect(await getNotebook(database.app, newcomer, notebookId)).toMatchObject({ role: 'editor' });
    const rows = await database.app.select().from(audit).where(eq(audit.kind, 'notebook.member'));
    expect(rows.at(-1)).toMatchObject({
      subject: 'newcomer',
      before: null,
      after: { role: 'editor' },
      notebookId,
    });
  });

  test('somebody unknown, a member already, a guest as more than a reader: each is told at its field', async () => {
    await expect(add(owner, 'nobody', 'reader')).rejects.toMatchObject({ fields: { who: /invite them/ } });
    await expect(add(owner, 'newcomer', 'reader')).rejects.toMatchObject({ fields: { who: /already/ } });
    await expect(add(owner, guest.login, 'editor')).rejects.toMatchObject({
      fields: { role: /only be a reader/ },
    });
    await add(owner, guest.login, 'reader');
    await expect(change(owner, guest, 'owner')).rejects.toMatchObject({
      fields: { role: /only be a reader/ },
    });
    expect(await roleOf(guest)).toBe('reader');
  });

  test('not somebody whose account is closed', async () => {
    const closed = await makePerson(database.app, { active: false });
    await expect(add(owner, closed.login, 'reader')).rejects.toMatchObject({ code: 'bad-input' });
  });
});

describe('changing and removing', () => {
  test('takes effect at once, and what was is noted', async () => {
    await change(owner, newcomer, 'reader');
    expect(await roleOf(newcomer)).toBe('reader');
    await change(owner, newcomer, null);
    expect(await roleOf(newcomer)).toBeNull();
    await expect(getNotebook(database.app, newcomer, notebookId)).rejects.toMatchObject({
      code: 'not-found',
    });
    await expect(change(owner, newcomer, 'reader')).rejects.toMatchObject({ code: 'not-found' });
  });

  test('the last owner stays one', async () => {
    await expect(change(owner, owner, 'editor')).rejects.toMatchObject({ code: 'conflict' });
    await expect(change(owner, owner, null)).rejects.toMatchObject({ code: 'conflict' });
    await change(owner, editor, 'owner');
    // Both at once: one of them is refused.
    const both = await Promise.allSettled([change(owner, editor, 'reader'), change(editor, owner, 'reader')]);
    expect(both.filter(({ status }) => status === 'fulfilled').length).toBe(1);
    expect([await roleOf(owner), await roleOf(editor)].filter((role) => role === 'owner').length).toBe(1);
  });
});
