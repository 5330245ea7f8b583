import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import * as Y from 'yjs';
import { CLOSE, REFUSALS, SCHEMA_VERSION } from '@/editor/close-codes';
import { Collaboration, endedSentence, refusedSentence } from '@/editor/collaboration';
import { encodePresence, readPresence } from '@/ws-server/awareness';
import { entryChangedFrame, projectedFrame, stateFrame } from '@/ws-server/frames';
import { until } from '../helpers/collab-clients';
import { ScriptedServer } from '../helpers/scripted-server';

/** What the page says of itself (integrity rules C1, C7, C13): "saved" is true only when nothing waits. */
let server: ScriptedServer;
let page: Collaboration;
const projected: number[] = [];
let entryChanges = 0;

const open = (epoch: number) =>
  new Collaboration({
    wsUrl: 'ws://127.0.0.1:1',
    entryId: 'e1',
    epoch,
    openSocket: server.openSocket,
    onProjected: (seq) => projected.push(seq),
    onEntryChanged: () => (entryChanges += 1),
  });
beforeEach(() => {
  server = new ScriptedServer();
  projected.length = 0;
  entryChanges = 0;
  page = open(1);
});
afterEach(() => page.destroy());

/** In place of the usual one: a page whose server answers as given. Comes back when its hello has arrived. */
async function anotherPage(given: { answersHello: boolean; epoch?: number }) {
  page.destroy();
  server = new ScriptedServer();
  server.answersHello = given.answersHello;
  page = open(given.epoch ?? 1);
  await until('hello', () => server.sockets.length === 1 && server.last.received.length > 0);
}

const phase = () => page.getState().phase;
const type = (words: string) => {
  const text = page.doc.getText('default');
  text.insert(text.length, words);
};
const saved = () => until('saved', () => phase() === 'saved');

describe('what is saved', () => {
  test('the page connects, loads what is there, and says saved once the server has taken its answer', async () => {
    await anotherPage({ answersHello: false });
    server.doc.getText('default').insert(0, 'Already here.');
    expect(page.getState()).toMatchObject({ phase: 'connecting', loaded: false, readOnly: true });
    server.answerHello();
    await saved();
    expect(page.getState()).toMatchObject({ loaded: true, readOnly: false, refusal: null, ended: null });
    expect(page.doc.getText('default').toString()).toBe('Already here.');
  });

  test('an edit is "saving" until its own acknowledgement, however many came before', async () => {
    await saved();
    server.acknowledges = false;
    const before = server.last.updates().length;
    type('one');
    type('two');
    expect(phase()).toBe('saving');
    expect(page.hasUnsaved).toBe(true);
    server.acknowledge(server.last, before + 1);
    expect(phase()).toBe('saving');
    server.acknowledge(server.last, before + 2);
    expect(phase()).toBe('saved');
    expect(page.hasUnsaved).toBe(false);
    expect(server.text()).toBe('onetwo');
  });

  test("somebody else's edit is nothing of ours to save", async () => {
    await saved();
    server.acknowledges = false;
    const other = new Y.Doc();
    other.getText('default').insert(0, 'theirs');
    server.tell(Y.encodeStateAsUpdate(other));
    expect(page.doc.getText('default').toString()).toBe('theirs');
    expect(phase()).toBe('saved');
  });

  test('without a line the page is offline and holds what is typed; the next connection sends it once', async () => {
    await saved();
    type('before ');
    server.reachable = false;
    server.last.end();
    await until('offline', () => phase() === 'offline');
    expect(page.getState().unsaved).toBe(false);
    let told = 0;
    page.subscribe(() => (told += 1));
    type('during');
    // The page is told, because what it shows changes: offline is one thing, offline with unsaved text another.
    expect(told).toBe(1);
    expect(page.getState()).toMatchObject({ phase: 'offline', unsaved: true });
    expect(page.hasUnsaved).toBe(true);
    server.reachable = true;
    await saved();
    expect(page.hasUnsaved).toBe(false);
    expect(server.text()).toBe('before during');
  });

  test('what was on its way when the line broke counts as unsaved, and is not doubled when it had arrived', async () => {
    await saved();
    server.acknowledges = false;
    type('stored, answer lost ');
    // The server has it; the acknowledgement never comes.
    Y.applyUpdate(server.doc, server.last.updates().at(-1)!);
    type('never arrived');
    server.last.end();
    expect(page.hasUnsaved).toBe(true);
    server.acknowledges = true;
    await saved();
    expect(server.text()).toBe('stored, answer lost never arrived');
    expect(page.doc.getText('default').toString()).toBe(server.text());
  });

  test('an edit while the line is closing is unsaved at once, not only when the close has been heard', async () => {
    await saved();
    server.last.readyState = 2;
    type('into a closing line');
    expect(page.hasUnsaved).toBe(true);
    expect(phase()).not.toBe('saved');
    server.last.end();
    await saved();
    expect(server.text()).toBe('into a closing line');
  });

  test('a close that is heard late, of a line that was given up, does not disturb the new one', async () => {
    await saved();
    const old = server.last;
    page.provider.disconnect();
    expect(old.closing).toBe(true);
    type('between two lines');
    expect(page.hasUnsaved).toBe(true);
    page.provider.connect();
    await saved();
    expect(server.last).not.toBe(old);
    old.end();
    expect(phase()).toBe('saved');
    type(', and on the new one');
    await saved();
    expect(server.text()).toBe('between two lines, and on the new one');
  });

  test('until hello is answered nothing but hello is sent', async () => {
    await anotherPage({ answersHello: false, epoch: 3 });
    type('early');
    expect(server.last.received).toEqual([
      { kind: 'hello', client: page.doc.clientID, schema: SCHEMA_VERSION, epoch: 3 },
    ]);
    expect(page.hasUnsaved).toBe(true);
    server.answerHello();
    await saved();
    expect(server.text()).toBe('early');
  });
});

describe('what the server refuses', () => {
  test.each(['locked', 'forbidden', 'full', 'too-big', 'schema'] as const)(
    '%s is told, the page becomes read-only, and the text stays',
    async (code) => {
      await saved();
      server.acknowledges = false;
      type('not taken');
      server.refuse(server.last, server.last.updates().length, code);
      expect(page.getState()).toMatchObject({ phase: 'refused', refusal: code, readOnly: true });
      expect(page.hasUnsaved).toBe(true);
      expect(page.doc.getText('default').toString()).toBe('not taken');
    },
  );

  test('a gap mends itself: all that the server lacks is sent again', async () => {
    await saved();
    server.acknowledges = false;
    type('lost on the way, ');
    type('and after it');
    const number = server.last.updates().length;
    server.acknowledges = true;
    server.refuse(server.last, number - 1, 'gap');
    server.refuse(server.last, number, 'gap');
    await saved();
    expect(server.text()).toBe('lost on the way, and after it');
  });

  test.each(['storage', 'slow-down'] as const)(
    '%s is tried again by itself, later and without a word',
    async (code) => {
      await saved();
      server.acknowledges = false;
      type('patience');
      const first = server.last;
      server.refuse(first, first.updates().length, code);
      expect(phase()).toBe('offline');
      expect(page.hasUnsaved).toBe(true);
      server.acknowledges = true;
      await saved();
      expect(server.last).not.toBe(first);
      expect(server.text()).toBe('patience');
    },
  );

  test('a page that goes while it waits to try again opens no line any more', async () => {
    await saved();
    server.acknowledges = false;
    type('patience');
    server.refuse(server.last, server.last.updates().length, 'storage');
    const opened = server.sockets.length;
    page.destroy();
    // Longer than the longest first pause (0.5 s to 1 s).
    await new Promise((resolve) => setTimeout(resolve, 1300));
    expect(server.sockets.length).toBe(opened);
  });

  test('a client id that somebody else has is changed, and the page knocks again and shows its caret under the new one', async () => {
    await anotherPage({ answersHello: false });
    const id = page.doc.clientID;
    page.provider.awareness.setLocalState({ cursor: { at: 1 } });
    server.refuse(server.last, 0, 'foreign-id');
    server.answersHello = true;
    await saved();
    expect(page.doc.clientID).not.toBe(id);
    expect(server.last.received[0]).toMatchObject({ kind: 'hello', client: page.doc.clientID });
    type('mine');
    await saved();
    expect([...server.doc.store.clients.keys()]).toEqual([page.doc.clientID]);
    const shown = server.last.received.flatMap((one) =>
      one.kind === 'awareness' ? [readPresence(one.payload, page.doc.clientID)?.state] : [],
    );
    expect(shown).toContainEqual({ cursor: { at: 1 } });
  });
});

describe('the end', () => {
  test.each([
    ['not signed in', CLOSE.notSignedIn, /signed out/i],
    ['no right', CLOSE.noRight, /no longer open/i],
    ['unknown', CLOSE.unknown, /cannot be opened/i],
    ['another epoch', CLOSE.otherEpoch, /begun anew/i],
    ['another version', CLOSE.reload, /updated/i],
  ])('%s: the page says so, keeps the text and does not knock again', async (_name, code, words) => {
    await saved();
    server.acknowledges = false;
    type('still mine');
    server.last.end(code);
    expect(page.getState()).toMatchObject({ phase: 'ended', ended: code, readOnly: true });
    expect(endedSentence(code)).toMatch(words);
    expect(endedSentence(code)).toMatch(/copy|sign in|cannot/i);
    expect(page.hasUnsaved).toBe(true);
    expect(page.doc.getText('default').toString()).toBe('still mine');
    const opened = server.sockets.length;
    await new Promise((resolve) => setTimeout(resolve, 800));
    expect(server.sockets.length).toBe(opened);
    expect(phase()).toBe('ended');
  });

  test.each([
    ['too big', CLOSE.tooBig],
    ['overloaded', CLOSE.overloaded],
    ['the server starts again', 1012],
  ])('%s is no end: the page comes back by itself', async (_name, code) => {
    await saved();
    server.last.end(code);
    expect(phase()).toBe('offline');
    await saved();
  });
});

describe('what holds for the page', () => {
  test('read-only comes and goes with what the server says', async () => {
    await saved();
    server.last.say(stateFrame({ ...server.state, readOnly: true, state: 'closing' }));
    expect(page.getState()).toMatchObject({ readOnly: true, phase: 'saved' });
    server.last.say(stateFrame(server.state));
    expect(page.getState().readOnly).toBe(false);
  });

  test('results and changes of the title are passed on', async () => {
    await saved();
    server.last.say(projectedFrame(12));
    server.last.say(entryChangedFrame());
    expect(projected).toEqual([12]);
    expect(entryChanges).toBe(1);
  });

  test('people are listed once each, by name, without oneself', async () => {
    await saved();
    const person = (client: number, id: string, name: string) => ({
      client,
      clock: 1,
      state: { user: { id, name, color: '#1f6fb2', role: 'editor' } },
    });
    server.present(
      encodePresence([person(1, 'p1', 'Noor V.'), person(2, 'p2', 'Keita S.'), person(3, 'p2', 'Keita S.')]),
    );
    expect(page.getState().people.map((one) => one.name)).toEqual(['Keita S.', 'Noor V.']);
    server.present(encodePresence([{ client: 1, clock: 2, state: null }]));
    expect(page.getState().people.map((one) => one.name)).toEqual(['Keita S.']);
  });

  test('listeners are told of changes only, and of nothing after the page has gone', async () => {
    await saved();
    let told = 0;
    const leave = page.subscribe(() => (told += 1));
    server.last.say(stateFrame(server.state));
    expect(told).toBe(0);
    server.last.say(stateFrame({ ...server.state, readOnly: true }));
    expect(told).toBe(1);
    leave();
    server.last.say(stateFrame(server.state));
    expect(told).toBe(1);
  });

  test('each refusal and each end has a sentence that says what to do', () => {
    for (const code of [...REFUSALS, null]) expect(refusedSentence(code)).toMatch(/copy|new entry/i);
    for (const code of [...Object.values(CLOSE), null]) expect(endedSentence(code)).toMatch(/\.$/);
  });
});
