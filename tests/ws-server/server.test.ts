import { sql } from 'drizzle-orm';
import type WebSocket from 'ws';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import * as Y from 'yjs';
import { appendServerEdit, seedEntry } from '../../db/commands/entry/write-document';
import { endLogin } from '../../db/commands/login/end-login';
import type { Actor } from '../../db/policies/may';
import { CLOSE, SCHEMA_VERSION } from '../../editor/close-codes';
import { helloFrame, updateFrame } from '../../ws-server/frames';
import { startServer, type RunningServer } from '../../ws-server/server';
import { makeClient, PUBLIC_URL, rawSocket, SECRET, until, type TestClient } from '../helpers/collab-clients';
import { createTestDatabase, type TestDatabase } from '../helpers/database';
import { makeEntry, makeMember, makeNotebook, makePerson } from '../helpers/factories';

let database: TestDatabase;
let server: RunningServer;
let noor: Actor;
let keita: Actor;
let reader: Actor;
let notebookId: string;
let entryId: string;
const open: TestClient[] = [];

beforeAll(async () => {
  database = await createTestDatabase();
  noor = await makePerson(database.app, { name: 'Noor V.' });
  keita = await makePerson(database.app, { name: 'Keita S.' });
  reader = await makePerson(database.app, { role: 'guest' });
  notebookId = (await makeNotebook(database.app, noor)).id;
  await makeMember(database.app, notebookId, keita, 'editor');
  await makeMember(database.app, notebookId, reader, 'reader');
  server = await startServer({
    port: 0,
    databaseUrl: database.urls.motebook_ws,
    publicUrl: PUBLIC_URL,
    secret: SECRET,
  });
});
afterAll(async () => {
  await server.stop();
  await database.drop();
});
beforeEach(async () => {
  entryId = await newEntry();
});
afterEach(() => {
  for (const client of open.splice(0)) client.destroy();
});

async function newEntry(): Promise<string> {
  const id = await makeEntry(database.app, notebookId, noor);
  await database.app.transaction((tx) => seedEntry(tx, { entryId: id, actor: noor }));
  return id;
}

async function join(actor: Actor, id = entryId): Promise<TestClient> {
  const client = await makeClient(server.port, id, actor);
  open.push(client);
  await until('the client is synced', () => client.provider.synced);
  return client;
}

const rows = async (id = entryId) =>
  Number(
    (
      await database.app.execute<{ n: string }>(
        sql`SELECT count(*)::int AS n FROM entry_update WHERE entry_id = ${id}`,
      )
    ).rows[0]?.n,
  );

function closed(socket: WebSocket): Promise<number> {
  return new Promise((resolve) => socket.once('close', (code) => resolve(code)));
}

/** Frames that a raw socket gets, decoded just enough: type and, for refusals, the code. */
async function answers(socket: WebSocket, frames: Uint8Array[]): Promise<string[]> {
  const got: string[] = [];
  socket.on('message', (data: ArrayBuffer) => {
    const bytes = new Uint8Array(data);
    got.push(bytes[0] === 101 ? `refused ${new TextDecoder().decode(bytes.subarray(3))}` : String(bytes[0]));
  });
  await new Promise((resolve) => socket.once('open', resolve));
  for (const frame of frames) socket.send(frame);
  return got;
}

describe('two people', () => {
  test('see each other type, and an acknowledgement means a row', async () => {
    const a = await join(noor);
    const b = await join(keita);
    a.type('Beads at 25 °C.');
    await until('acknowledged', () => a.unacknowledged() === 0);
    expect(await rows()).toBeGreaterThanOrEqual(2);
    await until('the other sees it', () => b.text() === 'Beads at 25 °C.');
    b.type(' Agreed.');
    await until('both converge', () => a.text() === 'Beads at 25 °C. Agreed.' && b.text() === a.text());
    const fresh = await join(keita);
    expect(fresh.text()).toBe(a.text());
  });

  test('an edit of the server appears live', async () => {
    const a = await join(noor);
    const append = [{ type: 'paragraph', content: [{ type: 'text', text: 'From a template.' }] }];
    await database.app.transaction((tx) => appendServerEdit(tx, { entryId, actor: keita, append }));
    await until('it appears', () => a.text().includes('From a template.'));
  });

  test('a name beside a caret is the account, whatever the client says', async () => {
    const a = await join(noor);
    const b = await join(keita);
    b.provider.awareness.setLocalState({ user: { name: 'The Director', color: '#000000' }, cursor: null });
    await until('presence arrives', () => a.provider.awareness.getStates().has(b.doc.clientID));
    const seen = a.provider.awareness.getStates().get(b.doc.clientID) as {
      user: { name: string; id: string };
    };
    expect(seen.user).toMatchObject({ name: 'Keita S.', id: keita.personId });
    b.destroy();
    await until('presence goes', () => !a.provider.awareness.getStates().has(b.doc.clientID));
  });
});

describe('rights', () => {
  test('a reader sees changes, but what a reader sends makes no row and reaches nobody', async () => {
    const writer = await join(noor);
    const guest = await join(reader);
    const before = await rows();
    guest.type('not allowed');
    await until('refused', () => guest.refusals.includes('forbidden'));
    expect(await rows()).toBe(before);
    writer.type('Only this.');
    await until('seen', () => guest.text().includes('Only this.'));
    expect(writer.text()).toBe('Only this.');
    expect(guest.unacknowledged()).toBeGreaterThan(0);
  });

  test('no cookie 401, foreign origin 403, before any byte of a document', async () => {
    for (const [actor, origin, status] of [
      [null, PUBLIC_URL, 401],
      [noor, 'http://127.0.0.1:1', 403],
      [noor, 'https://elsewhere.example', 403],
    ] as const) {
      const socket = await rawSocket(server.port, entryId, actor, origin);
      const got = await new Promise((resolve) => {
        socket.once('unexpected-response', (_request, response) => resolve(response.statusCode));
        socket.once('open', () => resolve('open'));
        socket.once('error', () => undefined);
      });
      expect(got).toBe(status);
    }
  });

  test('an entry of another notebook and a random id look the same', async () => {
    const stranger = await makePerson(database.app);
    for (const id of [entryId, crypto.randomUUID()]) {
      expect(await closed(await rawSocket(server.port, id, stranger))).toBe(CLOSE.unknown);
    }
  });

  test('sign-out, a closed account and a lost membership end open sockets within the deadline', async () => {
    const person = await makePerson(database.app);
    await makeMember(database.app, notebookId, person, 'editor');
    const first = await join(person);
    await endLogin(database.app, person.loginId);
    await until('closed after sign-out', () => first.closes.includes(CLOSE.notSignedIn));

    const member = await makePerson(database.app);
    await makeMember(database.app, notebookId, member, 'editor');
    const second = await join(member);
    await database.app.execute(sql`DELETE FROM notebook_member WHERE person_id = ${member.personId}`);
    await until('closed without membership', () => second.closes.includes(CLOSE.noRight));

    const leaver = await makePerson(database.app);
    await makeMember(database.app, notebookId, leaver, 'editor');
    const third = await join(leaver);
    await database.app.execute(sql`UPDATE person SET active = false WHERE id = ${leaver.personId}`);
    await until('closed with the account', () => third.closes.includes(CLOSE.notSignedIn));
  });

  test('an entry that is no draft any more refuses, and the text stays in the page', async () => {
    const a = await join(noor);
    await database.owner.execute(
      sql`UPDATE entry SET state = 'signed', lock = lock + 1 WHERE id = ${entryId}`,
    );
    a.type('too late');
    await until('refused', () => a.refusals.includes('locked'));
    expect(a.text()).toBe('too late');
    expect(await rows()).toBe(1);
  });
});

describe('frames that no honest client sends', () => {
  const update = (change: (doc: Y.Doc) => void, clientID = 77) => {
    const doc = new Y.Doc();
    doc.clientID = clientID;
    change(doc);
    return Y.encodeStateAsUpdate(doc);
  };
  const hello = helloFrame(77, SCHEMA_VERSION, 1);
  const paragraph = (doc: Y.Doc) => doc.getXmlFragment('default').insert(0, [new Y.XmlElement('paragraph')]);

  test.each([
    ['an update before hello', [updateFrame(update(paragraph))], 'refused forbidden'],
    ['content under a foreign id', [hello, updateFrame(update(paragraph, 78))], 'refused foreign-id'],
    ['another root', [hello, updateFrame(update((doc) => doc.getMap('x').set('a', 1)))], 'refused schema'],
    [
      'an unknown node',
      [
        hello,
        updateFrame(update((doc) => doc.getXmlFragment('default').insert(0, [new Y.XmlElement('script')]))),
      ],
      'refused schema',
    ],
    [
      'a sub-document',
      [hello, updateFrame(update((doc) => doc.getMap('default').set('d', new Y.Doc())))],
      'refused schema',
    ],
    ['rubbish as an update', [hello, updateFrame(new Uint8Array([9, 9, 9, 9, 9]))], 'refused schema'],
  ])('%s is refused and leaves no row', async (_what, frames, refusal) => {
    const socket = await rawSocket(server.port, entryId, keita);
    const got = await answers(socket, frames);
    await until('refused', () => got.includes(refusal));
    expect(await rows()).toBe(1);
    socket.terminate();
  });

  test('a gap is refused and the client is asked again for what is missing', async () => {
    const doc = new Y.Doc();
    doc.clientID = 77;
    paragraph(doc);
    const after = Y.encodeStateVector(doc);
    paragraph(doc);
    const socket = await rawSocket(server.port, entryId, keita);
    const got = await answers(socket, [hello, updateFrame(Y.encodeStateAsUpdate(doc, after))]);
    await until(
      'asked again',
      () => got.includes('refused gap') && got.filter((one) => one === '0').length >= 2,
    );
    expect(await rows()).toBe(1);
    socket.terminate();
  });

  test("another account's client id is refused at hello", async () => {
    const a = await join(noor);
    const socket = await rawSocket(server.port, entryId, keita);
    const got = await answers(socket, [helloFrame(a.doc.clientID, SCHEMA_VERSION, 1)]);
    await until('refused', () => got.includes('refused foreign-id'));
    socket.terminate();
  });

  test('another epoch, a newer page, rubbish and giant frames close with their codes', async () => {
    for (const [frame, code] of [
      [helloFrame(5, SCHEMA_VERSION, 2), CLOSE.otherEpoch],
      [helloFrame(5, SCHEMA_VERSION + 1, 1), CLOSE.reload],
      [new Uint8Array([250, 1, 2]), CLOSE.reload],
      [new Uint8Array(1024 * 1024 + 10), CLOSE.tooBig],
    ] as const) {
      const socket = await rawSocket(server.port, entryId, keita);
      const end = closed(socket);
      await new Promise((resolve) => socket.once('open', resolve));
      socket.send(frame);
      expect(await end).toBe(code);
    }
  });

  test('what is stored already is acknowledged without a row', async () => {
    const a = await join(noor);
    a.type('once');
    await until('acknowledged', () => a.unacknowledged() === 0);
    const before = await rows();
    const idle = await join(keita);
    await until('the reader is acknowledged', () => idle.acked.size > 0);
    expect(await rows()).toBe(before);
  });
});
