import * as decoding from 'lib0/decoding';
import * as encoding from 'lib0/encoding';
import { LIMITS } from './limits';

/**
 * Carets and presence. A socket may speak for its own client id only; name and colour are the account's, filled in here,
 * so that nobody can appear as somebody else or take somebody's caret away.
 */

/** Distinguishable on the product's light and dark paper; not the colours of verdicts. */
const COLOURS = [
  '#b3541e',
  '#1f6fb2',
  '#7a5195',
  '#2f7d4f',
  '#a23b5c',
  '#7c6a0a',
  '#0f7c85',
  '#5b5ea6',
] as const;

export interface Presence {
  readonly client: number;
  readonly clock: number;
  /** null: gone. */
  readonly state: Record<string, unknown> | null;
}

/** The same colour for a person in every entry. */
export function colourOf(personId: string): string {
  let hash = 0;
  for (const letter of personId) hash = (hash * 31 + letter.charCodeAt(0)) >>> 0;
  return COLOURS[hash % COLOURS.length]!;
}

/**
 * Reads a socket's own state from an awareness frame.
 * @returns null when the frame is too large, speaks for another client, or is no awareness at all.
 */
export function readPresence(payload: Uint8Array, ownClient: number): Presence | null {
  if (payload.length > LIMITS.awarenessBytes) return null;
  try {
    const decoder = decoding.createDecoder(payload);
    const count = decoding.readVarUint(decoder);
    if (count !== 1) return null;
    const client = decoding.readVarUint(decoder);
    const clock = decoding.readVarUint(decoder);
    const state = JSON.parse(decoding.readVarString(decoder)) as unknown;
    if (client !== ownClient) return null;
    if (state === null) return { client, clock, state: null };
    return typeof state === 'object' && !Array.isArray(state)
      ? { client, clock, state: state as Record<string, unknown> }
      : null;
  } catch {
    return null;
  }
}

/** An awareness payload for the states of several clients. */
export function encodePresence(all: readonly Presence[]): Uint8Array {
  const encoder = encoding.createEncoder();
  encoding.writeVarUint(encoder, all.length);
  for (const one of all) {
    encoding.writeVarUint(encoder, one.client);
    encoding.writeVarUint(encoder, one.clock);
    encoding.writeVarString(encoder, JSON.stringify(one.state));
  }
  return encoding.toUint8Array(encoder);
}

/** The state as others see it: only the caret is the client's, everything about the person is ours. */
export function withAccount(
  presence: Presence,
  person: { id: string; name: string },
  role: string,
): Presence {
  if (presence.state === null) return presence;
  const { cursor } = presence.state;
  return {
    ...presence,
    state: {
      ...(cursor === undefined ? {} : { cursor }),
      user: { id: person.id, name: person.name, color: colourOf(person.id), role },
    },
  };
}
