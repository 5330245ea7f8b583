import { createWriteStream } from 'node:fs';
import { once } from 'node:events';
import type { Readable } from 'node:stream';

const HEADER_END = Buffer.from('\r\n\r\n');
const LONGEST_HEADER_BYTES = 16 * 1024;

/** How a part arrived: to its end, with more bytes than expected (the surplus is not kept), or broken off. */
export type Arrival = 'whole' | 'too-much' | 'broken-off';

/**
 * Writes the single part of a multipart body to the end of a file while it arrives, so that a broken upload keeps what it
 * brought, and never a piece of the closing boundary (RFC 2046, 5.1.1; the line end behind it is optional).
 * @param expected - bytes of the part at most.
 */
export async function appendSinglePart(
  body: Readable,
  boundary: string,
  file: string,
  expected: number,
): Promise<Arrival> {
  const out = createWriteStream(file, { flags: 'a' });
  const closing = Buffer.from(`\r\n--${boundary}--`);
  let header: Buffer | null = Buffer.alloc(0);
  /** The last bytes so far: they may turn out to be the closing boundary. */
  let held: Buffer = Buffer.alloc(0);
  let left = expected;
  let surplus = false;
  let end = -1;
  const write = async (bytes: Buffer) => {
    surplus ||= bytes.length > left;
    const own = bytes.subarray(0, left);
    left -= own.length;
    if (own.length > 0 && !out.write(own)) await once(out, 'drain');
  };
  try {
    for await (const chunk of body) {
      let data = chunk as Buffer;
      if (header) {
        header = Buffer.concat([header, data]);
        const at = header.indexOf(HEADER_END);
        if (at < 0 && header.length > LONGEST_HEADER_BYTES) break;
        if (at < 0) continue;
        data = header.subarray(at + HEADER_END.length);
        header = null;
      }
      const all = Buffer.concat([held, data]);
      const sure = Math.max(0, all.length - closing.length - 2);
      await write(all.subarray(0, sure));
      held = all.subarray(sure);
    }
    end = endOfPart(held, closing);
  } catch {
    // The sender went away: what has arrived is kept, the rest comes with the next request.
  }
  await write(held.subarray(0, end >= 0 ? end : held.length - beginning(held, closing)));
  out.end();
  await once(out, 'close');
  if (surplus) return 'too-much';
  return end >= 0 ? 'whole' : 'broken-off';
}

/** Where the closing boundary begins, with nothing but a line end behind it; -1 when there is none. */
function endOfPart(held: Buffer, closing: Buffer): number {
  const at = held.lastIndexOf(closing);
  const behind = at < 0 ? '' : held.subarray(at + closing.length).toString('latin1');
  return behind === '' || behind === '\r\n' ? at : -1;
}

/** How many of the last bytes could be the beginning of the closing boundary. */
function beginning(held: Buffer, closing: Buffer): number {
  for (let length = Math.min(held.length, closing.length); length > 0; length--) {
    if (held.subarray(held.length - length).equals(closing.subarray(0, length))) return length;
  }
  return 0;
}
