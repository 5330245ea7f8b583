import { describe, expect, test } from 'vitest';
import * as Y from 'yjs';
import { BLOCK_DEFAULTS } from '../../db/inputs/block-settings';
import { FRAGMENT } from '../../editor/schema/index';
import { checkUpdate, type Placed, type UpdateCheck } from '../../ws-server/check-update';
import { LIMITS } from '../../ws-server/limits';

/** What may enter the log (integrity rule C4): whatever passes here must be replayable, for ever. */
const OWN = 77;
const OTHER = 78;

/** A document of one client, with what it holds from the start. */
function docOf(client: number, from?: Y.Doc): Y.Doc {
  const doc = new Y.Doc();
  if (from) Y.applyUpdate(doc, Y.encodeStateAsUpdate(from));
  doc.clientID = client;
  return doc;
}
const root = (doc: Y.Doc) => doc.getXmlFragment(FRAGMENT);
function paragraph(doc: Y.Doc, words: string): Y.XmlText {
  const text = new Y.XmlText();
  const element = new Y.XmlElement('paragraph');
  root(doc).insert(root(doc).length, [element]);
  element.insert(0, [text]);
  text.insert(0, words);
  return text;
}
const textOf = (doc: Y.Doc, at = 0) => (root(doc).get(at) as Y.XmlElement).get(0) as Y.XmlText;

/** What `change` adds to a document, as the frame that a client would send. */
function added(doc: Y.Doc, change: () => void): Uint8Array {
  const before = Y.encodeStateVector(doc);
  change();
  return Y.encodeStateAsUpdate(doc, before);
}

/** The check against a server that holds `server`, with more of this page's on its way into the store where given. */
function check(
  payload: Uint8Array,
  server: Y.Doc,
  queued = 0,
  ownQueued: readonly Placed[] = [],
): UpdateCheck {
  const ownKnown = Math.max(Y.getState(server.store, OWN), queued);
  return checkUpdate(payload, { doc: server, ownClient: OWN, ownKnown, ownQueued });
}
const refused = (code: string) => ({ ok: false, code });

/** Whatever was let in must leave nothing hanging in the air when the log is replayed. */
function replays(server: Y.Doc, payload: Uint8Array): boolean {
  const doc = docOf(1, server);
  Y.applyUpdate(doc, payload);
  return !doc.store.pendingStructs && !doc.store.pendingDs;
}

describe('what an honest page sends', () => {
  test('typing, marks, lists, a block with its settings, and deletions pass and say how far the client has come', () => {
    const server = docOf(1);
    const page = docOf(OWN);
    const changes: (() => void)[] = [
      () => paragraph(page, 'Beads at 25 °C.'),
      () => textOf(page).format(0, 5, { bold: {}, link: { href: 'https://lab.example', target: null } }),
      () => textOf(page).format(0, 5, { 'bold--hash': {} }),
      () => {
        const list = new Y.XmlElement('bulletList');
        const item = new Y.XmlElement('listItem');
        list.insert(0, [item]);
        root(page).insert(1, [list]);
      },
      () => {
        const block = new Y.XmlElement('diffusionBlock');
        for (const [name, value] of Object.entries({ ...BLOCK_DEFAULTS, blockId: 'b', caption: 'x' }))
          block.setAttribute(name, value as unknown as string);
        root(page).insert(2, [block]);
      },
      () => textOf(page).delete(0, 5),
      () => root(page).delete(1, 1),
    ];
    for (const change of changes) {
      const payload = added(page, change);
      expect(check(payload, server)).toMatchObject({
        ok: true,
        nothingNew: false,
        ownClock: Y.getState(page.store, OWN),
      });
      Y.applyUpdate(server, payload);
    }
    expect(server.store.pendingStructs).toBeNull();
    expect(root(server).toString()).toBe(root(page).toString());
  });

  test('writing inside what somebody else wrote, and deleting it, is no foreign content', () => {
    const server = docOf(OTHER);
    paragraph(server, 'theirs');
    const page = docOf(OWN, server);
    const payload = added(page, () => {
      textOf(page).insert(3, ' and mine ');
      textOf(page).delete(0, 2);
    });
    expect(check(payload, server)).toMatchObject({ ok: true, nothingNew: false });
    expect(replays(server, payload)).toBe(true);
  });

  test('what is stored already is nothing new, and neither are deletions that are stored', () => {
    const server = docOf(OTHER);
    paragraph(server, 'theirs');
    textOf(server).delete(1, 2);
    expect(check(Y.encodeStateAsUpdate(server), server)).toEqual({ ok: true, nothingNew: true });
    expect(check(Y.encodeStateAsUpdate(new Y.Doc()), server)).toEqual({ ok: true, nothingNew: true });
    const page = docOf(OWN, server);
    const payload = added(page, () => textOf(page).delete(0, 1));
    expect(check(payload, server)).toMatchObject({ ok: true, nothingNew: false });
  });

  test('the second of two frames passes while the first is still on its way into the store', () => {
    const server = docOf(1);
    const page = docOf(OWN);
    const first = added(page, () => paragraph(page, 'one'));
    const clock = Y.getState(page.store, OWN);
    const second = added(page, () => textOf(page).insert(3, ' two'));
    expect(check(second, server)).toEqual(refused('gap'));
    expect(check(second, server, clock)).toMatchObject({ ok: true, nothingNew: false });
    expect(check(first, server, clock)).toEqual({ ok: true, nothingNew: true });
  });
});

describe('settings of a block', () => {
  /** A server with a block that has this value already, and a page that has loaded it. */
  function blockWith(attributes: Record<string, unknown>): {
    server: Y.Doc;
    page: Y.Doc;
    block: Y.XmlElement;
  } {
    const server = docOf(OTHER);
    const made = new Y.XmlElement('diffusionBlock');
    root(server).insert(0, [made]);
    for (const [name, value] of Object.entries(attributes)) made.setAttribute(name, value as string);
    const page = docOf(OWN, server);
    return { server, page, block: root(page).get(0) as Y.XmlElement };
  }
  const set = (block: Y.XmlElement, name: string, value: unknown) =>
    block.setAttribute(name, value as string);

  test('can be changed any number of times, also one that somebody else had set', () => {
    const { server, page, block } = blockWith({ dims: 'auto', temperature: 25 });
    for (const value of [20, 30, null, 25.5]) {
      const payload = added(page, () => set(block, 'temperature', value));
      expect(check(payload, server)).toMatchObject({ ok: true, nothingNew: false });
      Y.applyUpdate(server, payload);
    }
    expect((root(server).get(0) as Y.XmlElement).getAttribute('temperature')).toBe(25.5);
  });

  test('can be changed twice in one frame, and twice before the first change is stored', () => {
    const { server, page, block } = blockWith({ dims: 'auto' });
    const both = added(page, () => {
      set(block, 'dims', 1);
      set(block, 'dims', 2);
    });
    // The first of the two is deleted already: of it only its length is sent.
    expect(check(both, server)).toMatchObject({ ok: true, nothingNew: false });
    const first = check(both, server);
    if (!first.ok || first.nothingNew) throw new Error('not taken');
    const second = added(page, () => set(block, 'dims', 3));
    expect(check(second, server, first.ownClock, first.placed)).toMatchObject({
      ok: true,
      nothingNew: false,
    });
  });

  test('of a block that others have removed meanwhile can be changed in vain', () => {
    const { server, page, block } = blockWith({ dims: 'auto' });
    root(server).delete(0, 1);
    const payload = added(page, () => set(block, 'dims', 2));
    expect(check(payload, server)).toMatchObject({ ok: true, nothingNew: false });
    expect(replays(server, payload)).toBe(true);
    Y.applyUpdate(server, payload);
    expect(root(server).length).toBe(0);
  });

  test('an object put beside a letter is no setting, though it does not say where it stands', () => {
    const server = docOf(OTHER);
    paragraph(server, 'theirs');
    const page = docOf(OWN, server);
    const text = textOf(page);
    const payload = added(page, () =>
      page.transact((transaction) => {
        const left = text._start;
        if (!left) throw new Error('no letter');
        const id = Y.createID(OWN, Y.getState(page.store, OWN));
        const content = new Y.ContentAny([{ script: 'x' }]);
        new Y.Item(id, left, left.lastId, left.right, left.right?.id ?? null, text, null, content).integrate(
          transaction,
          0,
        );
      }),
    );
    expect(replays(server, payload)).toBe(true);
    expect(check(payload, server)).toEqual(refused('schema'));
  });

  test('a node or letters in the place of a setting are refused', () => {
    const { server, page, block } = blockWith({ caption: 'x' });
    const node = added(page, () => set(block, 'caption', new Y.XmlElement('paragraph')));
    expect(check(node, server)).toEqual(refused('schema'));
  });
});

describe('gaps', () => {
  test('a frame that was skipped is missed, in front of the update and inside it', () => {
    const server = docOf(1);
    const page = docOf(OWN);
    const first = added(page, () => paragraph(page, 'one'));
    added(page, () => textOf(page).insert(3, ' lost'));
    const third = added(page, () => textOf(page).insert(0, 'three '));
    Y.applyUpdate(server, first);
    expect(check(third, server)).toEqual(refused('gap'));
    expect(check(Y.mergeUpdates([first, third]), server)).toEqual(refused('gap'));
  });

  test('deleting what is not known yet is a gap', () => {
    const server = docOf(1);
    const page = docOf(OWN);
    Y.applyUpdate(
      server,
      added(page, () => paragraph(page, 'one')),
    );
    // The frame with the words was lost; only their deletion arrives.
    added(page, () => textOf(page).insert(3, ' two'));
    const deletion: Uint8Array[] = [];
    page.on('update', (update: Uint8Array) => deletion.push(update));
    textOf(page).delete(3, 4);
    expect(check(deletion[0]!, server)).toEqual(refused('gap'));
  });

  // A row that names what the log does not hold stays pending at every replay: the entry would never open again.
  test.each([
    ['stands behind', (text: Y.XmlText) => text.insert(text.length, 'mine')],
    ['stands before', (text: Y.XmlText) => text.insert(0, 'mine')],
    [
      'stands inside',
      (_text: Y.XmlText, page: Y.Doc) => (root(page).get(0) as Y.XmlElement).insert(0, [new Y.XmlText()]),
    ],
    [
      'is an attribute of',
      (_text: Y.XmlText, page: Y.Doc) => (root(page).get(0) as Y.XmlElement).setAttribute('caption', 'x'),
    ],
  ])('own content that %s what the log does not hold is a gap', (_where, write) => {
    const elsewhere = docOf(OTHER);
    paragraph(elsewhere, 'never sent');
    const page = docOf(OWN, elsewhere);
    const payload = added(page, () => write(textOf(page), page));
    const server = docOf(1);
    expect(replays(server, payload)).toBe(false);
    expect(check(payload, server)).toEqual(refused('gap'));
    Y.applyUpdate(server, Y.encodeStateAsUpdate(elsewhere));
    expect(check(payload, server)).toMatchObject({ ok: true, nothingNew: false });
  });

  test("deleting somebody else's text that the log does not hold is a gap too", () => {
    const elsewhere = docOf(OTHER);
    paragraph(elsewhere, 'never sent');
    const page = docOf(OWN, elsewhere);
    const deletion: Uint8Array[] = [];
    page.on('update', (update: Uint8Array) => deletion.push(update));
    textOf(page).delete(0, 2);
    expect(check(deletion[0]!, docOf(1))).toEqual(refused('gap'));
  });

  test('own content that stands behind its own later content cannot be placed, and is a gap', () => {
    const server = docOf(1);
    const page = docOf(OWN);
    Y.applyUpdate(
      server,
      added(page, () => paragraph(page, 'one')),
    );
    const payload = added(page, () => {
      textOf(page).insert(3, 'a');
      textOf(page).insert(0, 'b');
    });
    expect(check(payload, server)).toMatchObject({ ok: true });
    // Both clocks are one byte; the neighbour's is made the item's own.
    const clock = Y.getState(page.store, OWN) - 2;
    const at = payload.findIndex((byte, i) => byte === OWN && payload[i + 1] === clock - 1);
    const twisted = payload.slice();
    twisted[at + 1] = clock;
    expect(check(twisted, server)).toEqual(refused('gap'));
  });
});

describe('what is not this page’s to write', () => {
  test("content under somebody else's id, and a clock burnt for them, are foreign", () => {
    const server = docOf(OTHER);
    paragraph(server, 'theirs');
    const forged = docOf(OTHER, server);
    const payload = added(forged, () => textOf(forged).insert(0, 'as if theirs'));
    expect(check(payload, server)).toEqual(refused('foreign-id'));
    const burnt = docOf(OTHER, server);
    const gone = added(burnt, () => {
      textOf(burnt).insert(0, 'xxxx');
      textOf(burnt).delete(0, 4);
    });
    expect(check(gone, server)).toEqual(refused('foreign-id'));
  });

  test.each<[string, (doc: Y.Doc) => void]>([
    ['another root of text', (doc) => doc.getText('notes').insert(0, 'x')],
    ['another root as a map', (doc) => doc.getMap('meta').set('a', 1)],
    ['an unknown node', (doc) => root(doc).insert(0, [new Y.XmlElement('script')])],
    ['a hook', (doc) => root(doc).insert(0, [new Y.XmlHook('paragraph') as unknown as Y.XmlElement])],
    [
      'an unknown attribute',
      (doc) => {
        const element = new Y.XmlElement('paragraph');
        element.setAttribute('onclick', 'x');
        root(doc).insert(0, [element]);
      },
    ],
    [
      'a measured value as an attribute of a block',
      (doc) => {
        const element = new Y.XmlElement('diffusionBlock');
        element.setAttribute('D', '0.43');
        root(doc).insert(0, [element]);
      },
    ],
    ['an unknown mark', (doc) => paragraph(doc, 'abc').format(0, 2, { blink: {} })],
    ['an embedded object', (doc) => paragraph(doc, 'abc').insertEmbed(1, { image: 'x' })],
    [
      'bytes',
      (doc) => {
        const element = new Y.XmlElement('diffusionBlock');
        element.setAttribute('caption', new Uint8Array([1, 2]) as unknown as string);
        root(doc).insert(0, [element]);
      },
    ],
    [
      'a document inside the document',
      (doc) => {
        const element = new Y.XmlElement('diffusionBlock');
        element.setAttribute('caption', new Y.Doc() as unknown as string);
        root(doc).insert(0, [element]);
      },
    ],
  ])('%s is refused', (_what, change) => {
    const page = docOf(OWN);
    const payload = added(page, () => change(page));
    expect(check(payload, docOf(1))).toEqual(refused('schema'));
  });
});

describe('size and rubbish', () => {
  test('as much as the limit passes, one more does not', () => {
    const page = docOf(OWN);
    const server = docOf(1);
    Y.applyUpdate(
      server,
      added(page, () => paragraph(page, '')),
    );
    for (const [more, answer] of [
      [0, { ok: true }],
      [1, refused('too-big')],
    ] as const) {
      const again = docOf(OWN, server);
      const payload = added(again, () => textOf(again).insert(0, 'x'.repeat(LIMITS.frameLength + more)));
      expect(check(payload, server)).toMatchObject(answer);
    }
  });

  test('every cut of a real update, and every single byte changed, is refused or can be replayed', () => {
    const server = docOf(OTHER);
    paragraph(server, 'theirs');
    const page = docOf(OWN, server);
    const payload = added(page, () => {
      textOf(page).insert(3, ' mine ');
      textOf(page).delete(0, 2);
      paragraph(page, 'more').format(0, 2, { bold: {} });
    });
    let letIn = 0;
    const look = (bytes: Uint8Array) => {
      const answer = check(bytes, server);
      if (!answer.ok || answer.nothingNew) return;
      letIn += 1;
      expect([...bytes, replays(server, bytes)]).toEqual([...bytes, true]);
    };
    look(payload);
    for (let end = 0; end < payload.length; end++) look(payload.slice(0, end));
    for (let at = 0; at < payload.length; at++) {
      for (const flip of [1, 2, 4, 8, 16, 32, 64, 128, 255]) {
        const changed = payload.slice();
        changed[at]! ^= flip;
        look(changed);
      }
    }
    expect(letIn).toBeGreaterThan(0);
  });
});
