import type WebSocket from 'ws';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { seedEntry } from '../../db/commands/entry/write-document';
import type { Actor } from '../../db/policies/may';
import { startServer, type RunningServer } from '../../ws-server/server';
import { PUBLIC_URL, SECRET, until } from '../helpers/collab-clients';
import { createTestDatabase, type TestDatabase } from '../helpers/database';
import { makeEntry, makeMember, makeNotebook, makePerson } from '../helpers/factories';
import { Typist } from '../helpers/typist';

let database: TestDatabase;
let server: RunningServer;
let noor: Actor;
let keita: Actor;
let entryId: string;

beforeAll(async () => {
  database = await createTestDatabase();
  noor = await makePerson(database.app, { name: 'Noor V.' });
  keita = await makePerson(database.app, { name: 'Keita S.' });
  const notebook = await makeNotebook(database.app, noor);
  await makeMember(database.app, notebook.id, keita, 'editor');
  entryId = await makeEntry(database.app, notebook.id, noor);
  await database.app.transaction((tx) => seedEntry(tx, { entryId, actor: noor }));
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

const people = (one: Typist) => one.page.getState().people.map((person) => person.name);
const caret = (seen: Typist, of: Typist) =>
  seen.page.provider.awareness.getStates().get(of.page.doc.clientID)?.cursor as unknown;

test('somebody whose line broke is seen again as soon as they are back, with their caret where it was', async () => {
  const a = await Typist.open('a', server.port, entryId, noor);
  const b = await Typist.open('b', server.port, entryId, keita);
  try {
    for (const one of [a, b]) await until('in', () => one.phase === 'saved');
    b.page.provider.awareness.setLocalStateField('cursor', { anchor: 3, head: 3 });
    await until('b is seen', () => people(a).includes('Keita S.') && caret(a, b) !== undefined);
    for (let round = 0; round < 3; round++) {
      (b.page.provider.ws as unknown as WebSocket).terminate();
      await until('b is gone', () => people(a).length === 0);
      await until('b is back', () => b.phase === 'saved');
      // Well before the stock client's own renewal, which comes after 15 s.
      await until('b is seen again', () => people(a).includes('Keita S.'), 8);
      expect(caret(a, b)).toEqual({ anchor: 3, head: 3 });
      expect(people(b)).toEqual(['Noor V.']);
    }
  } finally {
    a.close();
    b.close();
  }
});

test('who has two pages open is one person, and stays until the last of them is closed', async () => {
  const a = await Typist.open('a', server.port, entryId, noor);
  const pages = [
    await Typist.open('b', server.port, entryId, keita),
    await Typist.open('c', server.port, entryId, keita),
  ];
  try {
    for (const one of [a, ...pages]) await until('in', () => one.phase === 'saved');
    for (const one of pages) one.page.provider.awareness.setLocalStateField('cursor', null);
    const clients = () => a.page.provider.awareness.getStates().size;
    await until('both pages are known', () => clients() === 3);
    expect(people(a)).toEqual(['Keita S.']);
    pages[0]!.close();
    await until('one page has gone', () => clients() === 2);
    expect(people(a)).toEqual(['Keita S.']);
    pages[1]!.close();
    await until('both have gone', () => people(a).length === 0);
  } finally {
    for (const one of [a, ...pages]) one.close();
  }
});
