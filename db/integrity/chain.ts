import { createHash } from 'node:crypto';

/** The chain before the first update of an entry: 32 zero bytes. */
export const CHAIN_START = Buffer.alloc(32);

export interface ChainedUpdate {
  /** Id of the entry, as text. */
  entry: string;
  seq: bigint;
  epoch: bigint;
  /** Id of the account, as text. */
  person: string;
  /** Time of the row, microseconds since 1970 UTC. */
  micros: bigint;
  payload: Uint8Array;
}

/**
 * Next link of an entry's update chain:
 * c_n = SHA-256("motebook/chain/1" 0x00 ‖ c_(n−1) ‖ len16(entry) ‖ entry ‖ u64(seq) ‖ u64(epoch) ‖ len16(person) ‖ person
 * ‖ u64(µs) ‖ SHA-256(payload)), integers big-endian. Lengths are hashed too, so that no two inputs run together.
 * The database computes the same in `update_chain`; this twin lets a verifier do so without it.
 * @param previous - 32 bytes, `CHAIN_START` for the first update.
 * @returns 32 bytes.
 */
export function nextChain(previous: Uint8Array, update: ChainedUpdate): Buffer {
  const head = Buffer.from('motebook/chain/1\0', 'utf8');
  const payload = createHash('sha256').update(update.payload).digest();
  return createHash('sha256')
    .update(Buffer.concat([head, previous, sized(update.entry), u64(update.seq), u64(update.epoch)]))
    .update(Buffer.concat([sized(update.person), u64(update.micros), payload]))
    .digest();
}

function sized(text: string): Buffer {
  const bytes = Buffer.from(text, 'utf8');
  const length = Buffer.alloc(2);
  length.writeUInt16BE(bytes.length);
  return Buffer.concat([length, bytes]);
}

function u64(value: bigint): Buffer {
  const bytes = Buffer.alloc(8);
  bytes.writeBigUInt64BE(value);
  return bytes;
}
