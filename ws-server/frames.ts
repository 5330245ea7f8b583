import * as decoding from 'lib0/decoding';
import * as encoding from 'lib0/encoding';
import { FRAME, type Refusal } from '../editor/close-codes';

/** Encoding and decoding of frames; everything that arrives from a socket may be anything, so decoding throws on rubbish. */

export interface EntryState {
  readonly epoch: number;
  readonly lock: number;
  /** Schema version of the server. */
  readonly schema: number;
  readonly readOnly: boolean;
  readonly state: string;
}

export type Incoming =
  | { readonly kind: 'hello'; readonly client: number; readonly schema: number; readonly epoch: number }
  | { readonly kind: 'step1'; readonly stateVector: Uint8Array }
  /** Sync step 2 or an update: both carry an update and are counted. */
  | { readonly kind: 'update'; readonly payload: Uint8Array }
  | { readonly kind: 'awareness'; readonly payload: Uint8Array }
  | { readonly kind: 'query-awareness' };

const STEP_1 = 0;
const STEP_2 = 1;
const UPDATE = 2;
const QUERY_AWARENESS = 3;

/** @throws Error when the bytes are no frame that a client may send. */
export function decodeFrame(bytes: Uint8Array): Incoming {
  const decoder = decoding.createDecoder(bytes);
  const type = decoding.readVarUint(decoder);
  switch (type) {
    case FRAME.hello:
      return {
        kind: 'hello',
        client: decoding.readVarUint(decoder),
        schema: decoding.readVarUint(decoder),
        epoch: decoding.readVarUint(decoder),
      };
    case FRAME.sync: {
      const step = decoding.readVarUint(decoder);
      const payload = decoding.readVarUint8Array(decoder);
      if (step === STEP_1) return { kind: 'step1', stateVector: payload };
      if (step === STEP_2 || step === UPDATE) return { kind: 'update', payload };
      throw new Error(`unknown sync step ${step}`);
    }
    case FRAME.awareness:
      return { kind: 'awareness', payload: decoding.readVarUint8Array(decoder) };
    case QUERY_AWARENESS:
      return { kind: 'query-awareness' };
    default:
      throw new Error(`unknown frame type ${type}`);
  }
}

function frame(type: number, write: (encoder: encoding.Encoder) => void): Uint8Array {
  const encoder = encoding.createEncoder();
  encoding.writeVarUint(encoder, type);
  write(encoder);
  return encoding.toUint8Array(encoder);
}

const syncFrame = (step: number, payload: Uint8Array) =>
  frame(FRAME.sync, (encoder) => {
    encoding.writeVarUint(encoder, step);
    encoding.writeVarUint8Array(encoder, payload);
  });

export const step1Frame = (stateVector: Uint8Array) => syncFrame(STEP_1, stateVector);
export const step2Frame = (update: Uint8Array) => syncFrame(STEP_2, update);
export const updateFrame = (update: Uint8Array) => syncFrame(UPDATE, update);

export const ackFrame = (number: number, seq: number) =>
  frame(FRAME.ack, (encoder) => {
    encoding.writeVarUint(encoder, number);
    encoding.writeVarUint(encoder, seq);
  });

export const refusedFrame = (number: number, code: Refusal) =>
  frame(FRAME.refused, (encoder) => {
    encoding.writeVarUint(encoder, number);
    encoding.writeVarString(encoder, code);
  });

export const stateFrame = (state: EntryState) =>
  frame(FRAME.state, (encoder) => encoding.writeVarString(encoder, JSON.stringify(state)));

export const projectedFrame = (seq: number) =>
  frame(FRAME.projected, (encoder) => encoding.writeVarUint(encoder, seq));

export const entryChangedFrame = () => frame(FRAME.entry, () => undefined);

export const awarenessFrame = (payload: Uint8Array) =>
  frame(FRAME.awareness, (encoder) => encoding.writeVarUint8Array(encoder, payload));

/** First frame of a client. */
export const helloFrame = (client: number, schema: number, epoch: number) =>
  frame(FRAME.hello, (encoder) => {
    encoding.writeVarUint(encoder, client);
    encoding.writeVarUint(encoder, schema);
    encoding.writeVarUint(encoder, epoch);
  });
