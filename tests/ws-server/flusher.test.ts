import { afterEach, describe, expect, test, vi } from 'vitest';
import { Flusher, groupUpdates, type PendingUpdate, type UpdateGroup } from '../../ws-server/flusher';
import { LIMITS } from '../../ws-server/limits';
import { until } from '../helpers/collab-clients';

/** Group commit (integrity rule C3), with a store in memory that answers when the test lets it. */
type Outcome = { seqs: number[] } | { refused: 'locked' | 'storage' | 'epoch' };
interface Call {
  groups: readonly UpdateGroup[];
  answer(outcomes: Outcome[]): void;
  fail(error: Error): void;
}

const calls: Call[] = [];
const store = {
  append: (groups: readonly UpdateGroup[]) =>
    new Promise<Outcome[]>((resolve, reject) => calls.push({ groups, answer: resolve, fail: reject })),
};
const told: string[] = [];
let running = 0;

function update(name: string, given: Partial<PendingUpdate> = {}): PendingUpdate {
  return {
    entryId: 'e1',
    epoch: 1,
    lock: 0,
    personId: 'p1',
    loginId: 'l1',
    client: 1,
    payload: new TextEncoder().encode(name),
    done: (outcome) => told.push(`${name} ${'seq' in outcome ? outcome.seq : outcome.refused}`),
    ...given,
  };
}
const names = (group: UpdateGroup) => group.updates.map((one) => new TextDecoder().decode(one.payload));
const batch = (call: Call | undefined) => call?.groups.map(names);
const commit = (call: Call | undefined) =>
  call?.answer(call.groups.map((group) => ({ seqs: group.updates.map(() => (running += 1)) })));

afterEach(() => {
  calls.length = 0;
  told.length = 0;
  running = 0;
  vi.restoreAllMocks();
});

describe('batches', () => {
  test('what arrives while a commit is under way goes together into the next one, and nothing is told before', async () => {
    const flusher = new Flusher(store);
    for (const name of ['a', 'b', 'c']) flusher.add(update(name));
    expect(batch(calls[0])).toEqual([['a']]);
    await Promise.resolve();
    expect(told).toEqual([]);
    commit(calls[0]);
    await until('the second batch', () => calls.length === 2);
    expect(told).toEqual(['a 1']);
    expect(batch(calls[1])).toEqual([['b', 'c']]);
    commit(calls[1]);
    await flusher.drain();
    expect(told).toEqual(['a 1', 'b 2', 'c 3']);
  });

  test('a batch ends at its size, but a large update goes alone rather than never', async () => {
    const flusher = new Flusher(store);
    const large = new Uint8Array(LIMITS.batchBytes + 1);
    const half = new Uint8Array(LIMITS.batchBytes / 2);
    flusher.add(update('first'));
    flusher.add(update('large', { payload: large }));
    for (const name of ['h1', 'h2', 'h3']) flusher.add(update(name, { payload: half }));
    const sizes = [];
    for (let i = 0; i < 4; i++) {
      await until('a batch', () => calls.length === i + 1);
      sizes.push(calls[i]!.groups.flatMap((group) => group.updates).length);
      commit(calls[i]);
    }
    await flusher.drain();
    expect(sizes).toEqual([1, 1, 2, 1]);
    expect(told.map((one) => one.split(' ')[0])).toEqual(['first', 'large', 'h1', 'h2', 'h3']);
  });

  test('draining waits for what is added meanwhile, and a flusher that has rested starts again', async () => {
    const flusher = new Flusher(store);
    await flusher.drain();
    flusher.add(update('a'));
    flusher.add(update('b'));
    let drained = false;
    const end = flusher.drain().then(() => (drained = true));
    commit(calls[0]);
    await until('the second batch', () => calls.length === 2);
    expect(drained).toBe(false);
    commit(calls[1]);
    await end;
    flusher.add(update('c'));
    expect(batch(calls[2])).toEqual([['c']]);
    commit(calls[2]);
    await flusher.drain();
    expect(told).toHaveLength(3);
  });
});

describe('groups', () => {
  test('entries go in ascending order, so that two servers lock alike; each account is one group, in its order of arrival', () => {
    const groups = groupUpdates([
      update('z1', { entryId: 'z' }),
      update('a1', { entryId: 'a' }),
      update('z2', { entryId: 'z', loginId: 'l2' }),
      update('a2', { entryId: 'a' }),
      update('z3', { entryId: 'z' }),
    ]);
    expect(groups.map(names)).toEqual([['a1', 'a2'], ['z1', 'z3'], ['z2']]);
    expect(new Set(groups.map((group) => group.batch)).size).toBe(3);
  });

  test.each([
    ['login', { loginId: 'l2' }],
    ['epoch', { epoch: 2 }],
    ['lock', { lock: 1 }],
  ])('another %s begins another group', (_what, given) => {
    expect(groupUpdates([update('a'), update('b', given)]).map(names)).toEqual([['a'], ['b']]);
  });
});

describe('when the store does not answer', () => {
  test('the same groups are tried again under the same batch ids, and told once', async () => {
    const flusher = new Flusher(store, [0, 0]);
    flusher.add(update('a'));
    calls[0]!.fail(new Error('the line broke'));
    await until('a second try', () => calls.length === 2);
    expect(calls[1]!.groups).toBe(calls[0]!.groups);
    expect(told).toEqual([]);
    commit(calls[1]);
    await flusher.drain();
    expect(told).toEqual(['a 1']);
  });

  test('after the last try the update is refused as not stored, and the next one is tried anew', async () => {
    vi.spyOn(console, 'error').mockImplementation(() => undefined);
    const flusher = new Flusher(store, [0]);
    flusher.add(update('a'));
    calls[0]!.fail(new Error('away'));
    await until('a second try', () => calls.length === 2);
    calls[1]!.fail(new Error('away'));
    await flusher.drain();
    expect(told).toEqual(['a storage']);
    flusher.add(update('b'));
    commit(calls[2]);
    await flusher.drain();
    expect(told).toEqual(['a storage', 'b 1']);
  });
});

describe('refusals', () => {
  test('a locked entry does not hold up another entry of the same batch', async () => {
    const flusher = new Flusher(store);
    flusher.add(update('first'));
    flusher.add(update('a', { entryId: 'a' }));
    flusher.add(update('b', { entryId: 'b' }));
    commit(calls[0]);
    await until('the batch', () => calls.length === 2);
    calls[1]!.answer([{ refused: 'locked' }, { seqs: [7] }]);
    await flusher.drain();
    expect(told).toEqual(['first 1', 'a locked', 'b 7']);
  });

  // A row that builds on one that is missing can never be replayed: the whole entry would not open any more.
  test('what waits behind a refused update of the same client is refused with it and never stored', async () => {
    vi.spyOn(console, 'error').mockImplementation(() => undefined);
    const flusher = new Flusher(store, []);
    flusher.add(update('a'));
    flusher.add(update('builds on a'));
    flusher.add(update('another client', { client: 2, loginId: 'l2' }));
    flusher.add(update('another entry', { entryId: 'e2' }));
    calls[0]!.fail(new Error('away'));
    await until('the next batch', () => calls.length === 2);
    expect(batch(calls[1])).toEqual([['another client'], ['another entry']]);
    commit(calls[1]);
    await flusher.drain();
    expect(told).toEqual(['a storage', 'builds on a storage', 'another client 1', 'another entry 2']);
  });

  test('updates of one entry under two locks never share a batch: the second might outlive the first', async () => {
    const flusher = new Flusher(store);
    flusher.add(update('first'));
    flusher.add(update('old lock'));
    flusher.add(update('new lock', { lock: 1 }));
    flusher.add(update('elsewhere', { entryId: 'e2' }));
    commit(calls[0]);
    await until('the second batch', () => calls.length === 2);
    expect(batch(calls[1])).toEqual([['old lock']]);
    calls[1]!.answer([{ refused: 'locked' }]);
    await until('the third batch', () => calls.length === 3);
    expect(batch(calls[2])).toEqual([['elsewhere']]);
    commit(calls[2]);
    await flusher.drain();
    expect(told).toEqual(['first 1', 'old lock locked', 'new lock locked', 'elsewhere 2']);
  });

  test('a listener that throws is told of on the console and holds up nobody', async () => {
    const said = vi.spyOn(console, 'error').mockImplementation(() => undefined);
    const flusher = new Flusher(store);
    flusher.add(
      update('a', {
        done: () => {
          throw new Error('a broken room');
        },
      }),
    );
    flusher.add(update('b'));
    commit(calls[0]);
    await until('the second batch', () => calls.length === 2);
    commit(calls[1]);
    await flusher.drain();
    expect(told).toEqual(['b 2']);
    expect(said.mock.calls.flat().join()).toContain('a broken room');
  });
});
