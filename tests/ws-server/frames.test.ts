import * as encoding from 'lib0/encoding';
import { describe, expect, test } from 'vitest';
import { CLOSE, FRAME, REFUSALS } from '../../editor/close-codes';
import {
  ackFrame,
  awarenessFrame,
  decodeFrame,
  entryChangedFrame,
  helloFrame,
  projectedFrame,
  refusedFrame,
  stateFrame,
  step1Frame,
  step2Frame,
  updateFrame,
} from '../../ws-server/frames';

const text = (words: string) => [...new TextEncoder().encode(words)];
const bytes = (...values: number[]) => new Uint8Array(values);

// Numbers are written as in lib0: seven bits a byte, the lowest first, the high bit says that more follow (its README).
describe('frames, byte by byte', () => {
  test.each([
    ['acknowledgement', ackFrame(3, 300), [100, 3, 0xac, 0x02]],
    ['refusal', refusedFrame(3, 'gap'), [101, 3, 3, ...text('gap')]],
    ['results projected', projectedFrame(128), [104, 0x80, 0x01]],
    ['entry changed', entryChangedFrame(), [105]],
    ['hello', helloFrame(77, 1, 2), [103, 77, 1, 2]],
    ['sync step 1', step1Frame(bytes(0)), [0, 0, 1, 0]],
    ['sync step 2', step2Frame(bytes(7, 8)), [0, 1, 2, 7, 8]],
    ['update', updateFrame(bytes(7, 8)), [0, 2, 2, 7, 8]],
    ['awareness', awarenessFrame(bytes(0)), [1, 1, 0]],
  ])('%s', (_name, frame, expected) => {
    expect([...frame]).toEqual(expected);
  });

  test('a state is JSON, with all that the page needs', () => {
    const state = { epoch: 2, lock: 5, schema: 1, readOnly: true, state: 'closing' };
    const frame = stateFrame(state);
    expect(frame[0]).toBe(FRAME.state);
    expect(JSON.parse(new TextDecoder().decode(frame.subarray(2)))).toEqual(state);
  });
});

describe('what arrives', () => {
  test('each frame of a client is read back, hello with the largest client id', () => {
    expect(decodeFrame(helloFrame(2 ** 32 - 1, 1, 2))).toEqual({
      kind: 'hello',
      client: 2 ** 32 - 1,
      schema: 1,
      epoch: 2,
    });
    expect(decodeFrame(step1Frame(bytes(1)))).toEqual({ kind: 'step1', stateVector: bytes(1) });
    expect(decodeFrame(step2Frame(bytes(2)))).toEqual({ kind: 'update', payload: bytes(2) });
    expect(decodeFrame(updateFrame(bytes(3)))).toEqual({ kind: 'update', payload: bytes(3) });
    expect(decodeFrame(awarenessFrame(bytes(4)))).toEqual({ kind: 'awareness', payload: bytes(4) });
    expect(decodeFrame(bytes(3))).toEqual({ kind: 'query-awareness' });
  });

  test.each([
    ['nothing', []],
    ['a number that never ends', [0xff, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff]],
    ['a type that only the server sends', [FRAME.ack, 1, 1]],
    ['an unknown type', [99]],
    ['a permission message of the stock protocol', [2, 0]],
    ['an unknown sync step', [0, 3, 0]],
    ['a payload shorter than it says', [0, 2, 5, 1]],
    ['a hello that breaks off', [FRAME.hello, 1]],
  ])('%s is no frame', (_what, given) => {
    expect(() => decodeFrame(bytes(...given))).toThrow();
  });

  test('a payload is its own bytes, not a view that the socket may write over', () => {
    const frame = updateFrame(bytes(5, 6));
    const taken = decodeFrame(frame);
    expect(taken.kind === 'update' && [...taken.payload]).toEqual([5, 6]);
    const long = encoding.createEncoder();
    encoding.writeVarUint(long, 2 ** 40);
    expect(() => decodeFrame(bytes(0, 2, ...encoding.toUint8Array(long)))).toThrow();
  });
});

test('types, refusals and close codes are those of rule C13', () => {
  expect(FRAME).toMatchObject({ sync: 0, awareness: 1, ack: 100, refused: 101, state: 102, hello: 103 });
  expect([...REFUSALS].sort()).toEqual(
    'forbidden foreign-id full gap locked schema slow-down storage too-big'.split(' '),
  );
  expect(CLOSE).toEqual({
    notSignedIn: 4401,
    noRight: 4403,
    unknown: 4404,
    otherEpoch: 4409,
    reload: 4426,
    tooBig: 1009,
    overloaded: 1013,
  });
});
