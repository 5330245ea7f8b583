// @vitest-environment happy-dom
import { act } from 'react';
import { createRoot, type Root } from 'react-dom/client';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { useSavedValue, type SaveOutcome } from '@/components/notebook/use-saved-value';

/** A save whose answer the test gives when it likes. */
function handSave() {
  const asked: { value: string; answer: (outcome: SaveOutcome) => void; fail: (error: Error) => void }[] = [];
  const save = vi.fn(
    (value: string) =>
      new Promise<SaveOutcome>((resolve, reject) => asked.push({ value, answer: resolve, fail: reject })),
  );
  return { save, asked };
}

const saved: SaveOutcome = { ok: true, value: null };
const refused: SaveOutcome = {
  ok: false,
  refusal: { code: 'locked', sentence: 'This entry is no longer a draft.', fields: {} },
};

let root: Root;
let now: ReturnType<typeof useSavedValue>;
function Probe({ stored, save }: { stored: string; save: (value: string) => Promise<SaveOutcome> }) {
  now = useSavedValue(stored, save);
  return null;
}
const render = (stored: string, save: (value: string) => Promise<SaveOutcome>) =>
  act(async () => root.render(<Probe stored={stored} save={save} />));
const type = (value: string) => act(async () => now.setValue(value));
const commit = (value: string) =>
  act(async () => {
    void now.commit(value);
  });

beforeEach(() => {
  vi.stubGlobal('IS_REACT_ACT_ENVIRONMENT', true);
  root = createRoot(document.createElement('div'));
});
afterEach(async () => {
  await act(async () => root.unmount());
  vi.unstubAllGlobals();
});

describe('a value saved in place', () => {
  test('what is stored already is not sent again', async () => {
    const { save } = handSave();
    await render('A day', save);
    await commit('A day');
    expect(save).not.toHaveBeenCalled();
  });

  test('saves go one after the other, and only the newest of those that waited is sent', async () => {
    const { save, asked } = handSave();
    await render('', save);
    for (const value of ['B', 'Be', 'Bea', 'Beads']) {
      await type(value);
      await commit(value);
    }
    expect(asked.map(({ value }) => value)).toEqual(['B']);
    expect(now.state.is).toBe('saving');
    await act(async () => asked[0]?.answer(saved));
    expect(asked.map(({ value }) => value)).toEqual(['B', 'Beads']);
    await act(async () => asked[1]?.answer(saved));
    expect(now).toMatchObject({ value: 'Beads', state: { is: 'saved' } });
  });

  test('a refusal keeps what was typed and says why; another try can succeed', async () => {
    const { save, asked } = handSave();
    await render('A day', save);
    await type('Another day');
    await commit('Another day');
    await act(async () => asked[0]?.answer(refused));
    expect(now).toMatchObject({
      value: 'Another day',
      state: { is: 'failed', sentence: 'This entry is no longer a draft.' },
    });
    await commit('Another day');
    await act(async () => asked[1]?.answer(saved));
    expect(now.state.is).toBe('saved');
  });

  test('a server that cannot be reached is a refusal too', async () => {
    const warn = vi.spyOn(console, 'warn').mockImplementation(() => undefined);
    const { save, asked } = handSave();
    await render('', save);
    await type('Beads');
    await commit('Beads');
    await act(async () => asked[0]?.fail(new TypeError('fetch failed')));
    expect(now).toMatchObject({
      value: 'Beads',
      state: { is: 'failed', sentence: 'The server cannot be reached.' },
    });
    warn.mockRestore();
  });

  test('somebody else’s change is taken over', async () => {
    const { save } = handSave();
    await render('A day', save);
    await render('Their day', save);
    expect(now.value).toBe('Their day');
    await commit('Their day');
    expect(save).not.toHaveBeenCalled();
  });

  test('but not over what is being typed here, also when that is not yet sent', async () => {
    const { save, asked } = handSave();
    await render('A day', save);
    await type('My d');
    await render('Their day', save);
    expect(now.value).toBe('My d');
    await commit('My day');
    expect(asked.map(({ value }) => value)).toEqual(['My day']);
  });

  test('the echo of an own save does not take back what was typed meanwhile', async () => {
    const { save, asked } = handSave();
    await render('', save);
    await type('Beads');
    await commit('Beads');
    await act(async () => asked[0]?.answer(saved));
    await type('Beads, second');
    await render('Beads', save);
    expect(now.value).toBe('Beads, second');
  });
});
