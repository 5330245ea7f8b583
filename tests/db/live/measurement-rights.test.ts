import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { NO_FILTERS, type MeasurementQuery } from '../../../db/inputs/measurement';
import { may, type Actor } from '../../../db/policies/may';
import { mayReadNotebook } from '../../../db/policies/notebook-filter';
import { listMeasurements } from '../../../db/queries/measurement/list-measurements';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { makeMember, makePerson } from '../../helpers/factories';
import { sql } from 'drizzle-orm';
import { byLooking, makeWorld, type World } from './measurement-world';

/** Integrity check S27: somebody without rights learns nothing of an entry, neither rows nor counts nor paths to them. */
let database: TestDatabase;
let world: World;

beforeAll(async () => {
  database = await createTestDatabase();
  world = await makeWorld(database, 7);
});
afterAll(() => database.drop());

const ask = (actor: Actor, query: Partial<MeasurementQuery> = {}) =>
  listMeasurements(database.app, actor, { ...NO_FILTERS, after: null, limit: 100, ...query });

const NOTHING = { total: { count: 0, more: false }, extent: null, withoutD: null, without: [] };

describe('the access rule of lists', () => {
  test('agrees with the policy for everybody and every notebook', async () => {
    const everybody = Object.values(world.actors).map(({ actor }) => actor);
    const closed = await makePerson(database.app, { active: false });
    await makeMember(database.app, world.notebooks[0] as string, closed, 'editor');
    for (const actor of [...everybody, closed]) {
      for (const notebookId of world.notebooks) {
        const { rows } = await database.app.execute<{ listed: boolean; member: 'reader' | null }>(sql`
          select ${mayReadNotebook(actor, sql`${notebookId}::uuid`)} as listed,
            (select role from notebook_member where notebook_id = ${notebookId} and person_id = ${actor.personId}) as member`);
        const member = rows[0]?.member ?? null;
        expect(rows[0]?.listed).toBe(may(actor, 'notebook.read', { member }));
      }
    }
  });
});

describe('somebody who may not read an entry', () => {
  test.each(['outsider', 'admin'] as const)(
    '(%s, a member of nothing) finds and counts nothing',
    async (name) => {
      const { actor } = world.actors[name];
      expect(await ask(actor)).toEqual({ rows: [], next: null, summary: NOTHING });
      expect((await ask(actor, { dFrom: 0, dTo: 1e9, sort: 'd-asc' })).summary).toEqual({
        ...NOTHING,
        withoutD: { count: 0, more: false },
        without: [{ what: 'range', count: 0, more: false }],
      });
    },
  );

  test('gains nothing by naming the notebook, and learns no count from what would widen the question', async () => {
    const { actor } = world.actors.guest;
    const hidden = world.notebooks[0] as string;
    const { rows, summary } = await ask(actor, { notebook: [hidden], verdict: ['free'] });
    expect(rows).toEqual([]);
    const own = byLooking(world, world.actors.guest, { ...NO_FILTERS, verdict: ['free'] }).length;
    expect(summary?.without).toEqual([
      { what: 'verdict', count: 0, more: false },
      { what: 'notebook', count: own, more: false },
    ]);
    // The same answer as for a notebook that does not exist.
    expect((await ask(actor, { notebook: [randomUUID()], verdict: ['free'] })).summary).toEqual(summary);
  });

  test("gains nothing from somebody else's place in the list", async () => {
    const { next } = await ask(world.actors.owner.actor, { limit: 3 });
    expect(next).not.toBeNull();
    expect(await ask(world.actors.outsider.actor, { after: next })).toEqual({
      rows: [],
      next: null,
      summary: null,
    });
  });

  test('finds nothing any more once the membership has ended, also in the middle of the list', async () => {
    const actor = await makePerson(database.app);
    const notebookId = world.notebooks[1] as string;
    await makeMember(database.app, notebookId, actor, 'editor');
    const first = await ask(actor, { limit: 2 });
    expect(first.rows).toHaveLength(2);
    await database.app.$client.query('DELETE FROM notebook_member WHERE person_id = $1', [actor.personId]);
    expect((await ask(actor, { after: first.next })).rows).toEqual([]);
    expect((await ask(actor)).summary).toEqual(NOTHING);
  });
});

describe('a deactivated account', () => {
  test('is refused, and finds nothing where the request began before', async () => {
    const actor = await makePerson(database.app);
    await makeMember(database.app, world.notebooks[1] as string, actor, 'owner');
    expect((await ask(actor)).rows.length).toBeGreaterThan(0);
    await database.app.$client.query('UPDATE person SET active = false WHERE id = $1', [actor.personId]);
    expect(await ask(actor)).toEqual({ rows: [], next: null, summary: NOTHING });
    await expect(ask({ ...actor, active: false })).rejects.toMatchObject({ code: 'forbidden' });
  });
});

describe('a result whose notebook no longer agrees with that of its entry', () => {
  test('is found by nobody until it is derived anew', async () => {
    const reader = world.actors.guest;
    const [known] = byLooking(world, reader, NO_FILTERS);
    if (!known) throw new Error('the guest sees nothing');
    const move = (notebookId: string) =>
      database.app.$client.query('UPDATE block_result SET notebook_id = $1 WHERE block_id = $2', [
        notebookId,
        known.blockId,
      ]);
    await move(world.notebooks[0] as string);
    try {
      for (const name of ['guest', 'owner', 'reader'] as const) {
        const { rows, summary } = await ask(world.actors[name].actor);
        expect(rows.map((row) => row.blockId)).not.toContain(known.blockId);
        const others = byLooking(world, world.actors[name], NO_FILTERS).filter((row) => row !== known);
        expect(summary?.total.count).toBe(others.length);
      }
    } finally {
      await move(known.notebookId);
    }
  });
});

describe('the people of a measurement', () => {
  test('are who began the entry and whose edits reached it, not who merely opened it', async () => {
    const [first] = byLooking(world, world.actors.owner, NO_FILTERS);
    if (!first) throw new Error('the world is empty');
    const [writer, visitor] = [
      await makePerson(database.app, { name: 'Writer' }),
      await makePerson(database.app, { name: 'Visitor' }),
    ];
    for (const [client, actor] of [writer, visitor].entries()) {
      await makeMember(database.app, first.notebookId, actor, 'editor');
      await database.ws.$client.query('SELECT register_client($1, 1, $2, $3)', [
        first.entryId,
        client,
        actor.personId,
      ]);
    }
    await database.ws.$client.query('SELECT * FROM append_updates($1, 0, 1, $2, $3, $4, $5, $6)', [
      ...[first.entryId, writer.personId, writer.loginId, randomUUID(), [0], [Buffer.from([0])]],
    ]);
    const { rows } = await ask(world.actors.owner.actor);
    const row = rows.find(({ blockId }) => blockId === first.blockId);
    expect(row?.people).toEqual([world.actors.owner.actor.name, 'Writer']);
  });
});
