import * as encoding from 'lib0/encoding';
import { applyAwarenessUpdate, Awareness, encodeAwarenessUpdate } from 'y-protocols/awareness';
import { describe, expect, test } from 'vitest';
import * as Y from 'yjs';
import { colourOf, encodePresence, readPresence, withAccount } from '../../ws-server/awareness';
import { LIMITS } from '../../ws-server/limits';

/** Carets and names (integrity rule C10): a socket speaks for its own client id, and its name is the account's. */
function awarenessOf(client: number, state: Record<string, unknown> | null): Awareness {
  const doc = new Y.Doc();
  doc.clientID = client;
  const awareness = new Awareness(doc);
  awareness.setLocalState(state);
  clearInterval((awareness as unknown as { _checkInterval: NodeJS.Timeout })._checkInterval);
  return awareness;
}
const frame = (client: number, state: Record<string, unknown> | null) =>
  encodeAwarenessUpdate(awarenessOf(client, state), [client]);

/** As `encodePresence`, but with any text where the state stands. */
function raw(client: number, json: string, count = 1): Uint8Array {
  const encoder = encoding.createEncoder();
  encoding.writeVarUint(encoder, count);
  for (let i = 0; i < count; i++) {
    encoding.writeVarUint(encoder, client);
    encoding.writeVarUint(encoder, 1);
    encoding.writeVarString(encoder, json);
  }
  return encoding.toUint8Array(encoder);
}

const person = { id: 'p1', name: 'Keita S.' };

describe('reading', () => {
  test("the stock library's own frame is read, for the socket's own client only", () => {
    const payload = frame(7, { cursor: { anchor: 1, head: 2 } });
    expect(readPresence(payload, 7)).toMatchObject({ client: 7, state: { cursor: { anchor: 1, head: 2 } } });
    expect(readPresence(payload, 8)).toBeNull();
    expect(readPresence(raw(7, 'null'), 7)).toEqual({ client: 7, clock: 1, state: null });
  });

  test.each([
    ['nothing', new Uint8Array()],
    ['two states, though both are its own', raw(7, '{}', 2)],
    ['no state at all', raw(7, '{}', 0)],
    ['a list', raw(7, '[1]')],
    ['a number', raw(7, '3')],
    ['what is no JSON', raw(7, '{')],
    ['a state over the limit', raw(7, JSON.stringify({ cursor: 'x'.repeat(LIMITS.awarenessBytes) }))],
    ['a frame that breaks off', raw(7, '{"cursor":null}').slice(0, 6)],
  ])('%s is not taken', (_what, payload) => {
    expect(readPresence(payload, 7)).toBeNull();
  });
});

describe('what others see', () => {
  test('only the caret is the client’s; name, colour, id and role are the account’s, and nothing else passes', () => {
    const claimed = {
      cursor: { anchor: 1 },
      user: { id: 'p9', name: 'The Director', color: '#000000', role: 'owner' },
      more: '<img>',
    };
    const shown = withAccount({ client: 7, clock: 3, state: claimed }, person, 'editor');
    expect(shown).toEqual({
      client: 7,
      clock: 3,
      state: {
        cursor: { anchor: 1 },
        user: { id: 'p1', name: 'Keita S.', color: colourOf('p1'), role: 'editor' },
      },
    });
  });

  test('a person without a caret is there all the same, and one who has left is gone', () => {
    expect(withAccount({ client: 7, clock: 1, state: {} }, person, 'reader').state).not.toHaveProperty(
      'cursor',
    );
    expect(withAccount({ client: 7, clock: 1, state: null }, person, 'reader').state).toBeNull();
  });

  test('the stock library reads what is sent on, for several people at once, and their leaving', () => {
    const page = awarenessOf(1, null);
    const both = [7, 8].map((client) => withAccount({ client, clock: 2, state: {} }, person, 'editor'));
    applyAwarenessUpdate(page, encodePresence(both), 'server');
    expect([...page.getStates().keys()].sort()).toEqual([7, 8]);
    applyAwarenessUpdate(page, encodePresence([{ client: 7, clock: 2, state: null }]), 'server');
    expect([...page.getStates().keys()]).toEqual([8]);
  });

  test('a colour belongs to the person and can be put into a style as it is', () => {
    const ids = Array.from({ length: 200 }, (_, i) => `person-${i}`);
    for (const id of ids) expect(colourOf(id)).toMatch(/^#[0-9a-f]{6}$/);
    expect(colourOf('p1')).toBe(colourOf('p1'));
    expect(new Set(ids.map(colourOf)).size).toBeGreaterThan(4);
  });
});
