import { randomUUID } from 'node:crypto';
import { sql } from 'drizzle-orm';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Database } from '../../../db/client';
import { CHAIN_START, nextChain } from '../../../db/integrity/chain';
import type { Actor } from '../../../db/policies/may';
import { createTestDatabase, type TestDatabase } from '../../helpers/database';
import { makeEntry, makeLogin, makeMember, makeNotebook, makePerson } from '../../helpers/factories';

let database: TestDatabase;
let author: Actor;
let notebookId: string;

beforeAll(async () => {
  database = await createTestDatabase();
  author = await makePerson(database.app);
  notebookId = (await makeNotebook(database.app, author)).id;
});
afterAll(() => database.drop());

interface Row extends Record<string, unknown> {
  refusal: string | null;
  ordinal: number;
  seq: number;
}

async function append(
  db: Database,
  entryId: string,
  given: Partial<{
    actor: Actor;
    lock: number;
    epoch: number;
    batch: string;
    client: number;
    payloads: Buffer[];
  }> = {},
): Promise<Row[]> {
  const actor = given.actor ?? author;
  const payloads = given.payloads ?? [Buffer.from([1, 2, 3])];
  const clients = payloads.map(() => given.client ?? 7);
  const { rows } = await db.$client.query<Row>(
    'SELECT * FROM append_updates($1, $2, $3, $4, $5, $6, $7, $8)',
    [
      entryId,
      given.lock ?? 0,
      given.epoch ?? 1,
      actor.personId,
      actor.loginId,
      given.batch ?? randomUUID(),
      clients,
      payloads,
    ],
  );
  return rows;
}

async function newEntry(client = 7): Promise<string> {
  const id = await makeEntry(database.app, notebookId, author);
  await register(id, client, author);
  return id;
}

async function register(entryId: string, client: number, actor: Actor): Promise<string> {
  const { rows } = await database.ws.$client.query<{ answer: string }>(
    'SELECT register_client($1, 1, $2, $3) AS answer',
    [entryId, client, actor.personId],
  );
  return rows[0]?.answer ?? '';
}

describe('append_updates, the one write path of an entry', () => {
  test('numbers without gaps and chains, also when many write at once', async () => {
    const entryId = await newEntry();
    await Promise.all(
      Array.from({ length: 20 }, (_, i) =>
        append(database.ws, entryId, { payloads: [Buffer.from([i]), Buffer.from([i, i])] }),
      ),
    );
    const { rows } = await database.app.execute<{
      seq: number;
      epoch: number;
      person_id: string;
      micros: string;
      payload: Buffer;
      chain: Buffer;
    }>(sql`SELECT seq, epoch, person_id, payload, chain, (extract(epoch FROM at) * 1000000)::bigint::text AS micros
           FROM entry_update WHERE entry_id = ${entryId} ORDER BY seq`);
    expect(rows.map((row) => row.seq)).toEqual(Array.from({ length: 40 }, (_, i) => i + 1));
    let chain: Buffer = CHAIN_START;
    for (const row of rows) {
      chain = nextChain(chain, {
        entry: entryId,
        seq: BigInt(row.seq),
        epoch: BigInt(row.epoch),
        person: row.person_id,
        micros: BigInt(row.micros),
        payload: row.payload,
      });
      expect(row.chain.equals(chain)).toBe(true);
    }
    const { rows: heads } = await database.app.execute<{ head_seq: number; head_chain: Buffer }>(
      sql`SELECT head_seq, head_chain FROM entry WHERE id = ${entryId}`,
    );
    expect(heads[0]?.head_seq).toBe(40);
    expect(heads[0]?.head_chain.equals(chain)).toBe(true);
  });

  test('the same batch twice enters once and answers the same', async () => {
    const entryId = await newEntry();
    const batch = randomUUID();
    const first = await append(database.ws, entryId, {
      batch,
      payloads: [Buffer.from([1]), Buffer.from([2])],
    });
    const second = await append(database.ws, entryId, {
      batch,
      payloads: [Buffer.from([1]), Buffer.from([2])],
    });
    expect(second).toEqual(first);
    expect(first.map((row) => row.seq)).toEqual([1, 2]);
  });

  test('refuses with a code: lock, epoch, right, foreign id, size, unknown entry', async () => {
    const entryId = await newEntry();
    const reader = await makePerson(database.app);
    const guest = await makePerson(database.app, { role: 'guest' });
    const outsider = await makePerson(database.app);
    await makeMember(database.app, notebookId, reader, 'reader');
    await makeMember(database.app, notebookId, guest, 'editor');
    const refusal = async (given: Parameters<typeof append>[2], id = entryId) =>
      (await append(database.ws, id, given))[0]?.refusal;
    expect(await refusal({ lock: 1 })).toBe('locked');
    expect(await refusal({ epoch: 2 })).toBe('epoch');
    for (const actor of [reader, guest, outsider]) expect(await refusal({ actor })).toBe('forbidden');
    expect(await refusal({ actor: { ...author, loginId: reader.loginId } })).toBe('forbidden');
    expect(await refusal({ client: 8 })).toBe('foreign-id');
    expect(await refusal({ payloads: [Buffer.alloc(16 * 1024 * 1024 + 1)] })).toBe('full');
    expect(await refusal({}, randomUUID())).toBe('unknown');
    const { rows } = await database.app.execute(sql`SELECT 1 FROM entry_update WHERE entry_id = ${entryId}`);
    expect(rows).toHaveLength(0);
  });

  test('refuses once the entry is no draft any more, or the account is closed', async () => {
    const entryId = await newEntry();
    await database.owner.execute(sql`UPDATE entry SET state = 'signed' WHERE id = ${entryId}`);
    expect((await append(database.ws, entryId))[0]?.refusal).toBe('locked');
    const editor = await makePerson(database.app);
    await makeMember(database.app, notebookId, editor, 'editor');
    const other = await newEntry();
    await register(other, 9, editor);
    expect((await append(database.ws, other, { actor: editor, client: 9 }))[0]?.refusal).toBeNull();
    await database.app.execute(sql`UPDATE person SET active = false WHERE id = ${editor.personId}`);
    expect((await append(database.ws, other, { actor: editor, client: 9 }))[0]?.refusal).toBe('forbidden');
  });

  test('refuses while the notebook is archived', async () => {
    const archived = await makeNotebook(database.app, author);
    const entryId = await makeEntry(database.app, archived.id, author);
    await register(entryId, 7, author);
    expect((await append(database.ws, entryId))[0]?.refusal).toBeNull();
    await database.app.execute(
      sql`UPDATE notebook SET archived_at = motebook_now() WHERE id = ${archived.id}`,
    );
    expect((await append(database.ws, entryId))[0]?.refusal).toBe('forbidden');
    await database.app.execute(sql`UPDATE notebook SET archived_at = NULL WHERE id = ${archived.id}`);
    expect((await append(database.ws, entryId))[0]?.refusal).toBeNull();
  });

  test('a login that has ended writes nothing more', async () => {
    const entryId = await newEntry();
    const login = await makeLogin(database.app, author.personId);
    const actor = { ...author, loginId: login };
    expect((await append(database.ws, entryId, { actor }))[0]?.refusal).toBeNull();
    await database.app.execute(sql`UPDATE login SET ended_at = motebook_now() WHERE id = ${login}`);
    expect((await append(database.ws, entryId, { actor }))[0]?.refusal).toBe('forbidden');
  });

  test('a caller that mixes up its lists is told so and stores nothing', async () => {
    const entryId = await newEntry();
    const call = (clients: number[] | null, payloads: Buffer[] | null) =>
      database.ws.$client.query('SELECT * FROM append_updates($1, 0, 1, $2, $3, $4, $5, $6)', [
        ...[entryId, author.personId, author.loginId, randomUUID(), clients, payloads],
      ]);
    await expect(call([7, 7], [Buffer.from([1])])).rejects.toThrow(/one client id for each payload/);
    await expect(call(null, [Buffer.from([1])])).rejects.toThrow(/one client id for each payload/);
    await expect(call([7], null)).rejects.toThrow(/one client id for each payload/);
    expect((await call([], [])).rows).toEqual([]);
    const { rows } = await database.app.execute(sql`SELECT 1 FROM entry_update WHERE entry_id = ${entryId}`);
    expect(rows).toHaveLength(0);
  });

  test('each batch is announced once, with entry and head', async () => {
    const entryId = await newEntry();
    const client = new pg.Client({ connectionString: database.urls.motebook_ws });
    const heard: string[] = [];
    client.on('notification', (notice) => heard.push(notice.payload ?? ''));
    await client.connect();
    try {
      await client.query('LISTEN motebook_update');
      await append(database.ws, entryId, { payloads: [Buffer.from([1]), Buffer.from([2])] });
      await append(database.ws, entryId, { lock: 5 });
      // A query's answer comes after the notices that were committed before it.
      await client.query('SELECT 1');
      expect(heard.map((text) => JSON.parse(text) as unknown)).toEqual([{ entry: entryId, seq: 2 }]);
    } finally {
      await client.end();
    }
  });

  test('a client id belongs to the account that claimed it first', async () => {
    const entryId = await newEntry(11);
    const other = await makePerson(database.app);
    expect(await register(entryId, 11, author)).toBe('ok');
    expect(await register(entryId, 11, other)).toBe('foreign-id');
  });
});

test('the chain equals its known answer, in the database and in its twin', async () => {
  // Source: the project's integrity rules, section "known answers" (computed there with another program).
  const known = 'e254b4a043a051b22f8ff7c310f8f7a9da36202956a12465ea93bb7299620ed3';
  const payload = Buffer.from('0000', 'hex');
  const twin = nextChain(CHAIN_START, { entry: 'e1', seq: 1n, epoch: 1n, person: 'u1', micros: 0n, payload });
  expect(twin.toString('hex')).toBe(known);
  const { rows } = await database.app.$client.query<{ chain: Buffer }>(
    `SELECT update_chain($1, 'e1', 1, 1, 'u1', 0, $2) AS chain`,
    [CHAIN_START, payload],
  );
  expect(rows[0]?.chain.toString('hex')).toBe(known);
});
