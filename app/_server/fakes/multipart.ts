import { createWriteStream } from 'node:fs';
import { once } from 'node:events';
import type { Readable } from 'node:stream';

const HEADER_END = Buffer.from('\r\n\r\n');

/**
 * Writes the single part of a multipart body to the end of a file while it arrives, so that a broken upload keeps what it
 * brought.
 * @param expected - bytes of the part; what follows them may only be the closing boundary.
 * @returns false when the body brings more than was announced.
 */
export async function appendSinglePart(
  body: Readable,
  boundary: string,
  file: string,
  expected: number,
): Promise<boolean> {
  const out = createWriteStream(file, { flags: 'a' });
  const closing = Buffer.byteLength(`\r\n--${boundary}--\r\n`);
  let header: Buffer | null = Buffer.alloc(0);
  let left = expected;
  let behind = 0;
  try {
    for await (const chunk of body) {
      let data = chunk as Buffer;
      if (header) {
        header = Buffer.concat([header, data]);
        const end = header.indexOf(HEADER_END);
        if (end < 0) continue;
        data = header.subarray(end + HEADER_END.length);
        header = null;
      }
      const own = data.subarray(0, left);
      left -= own.length;
      behind += data.length - own.length;
      if (own.length > 0 && !out.write(own)) await once(out, 'drain');
    }
  } catch {
    // The sender went away: what has arrived is kept, the rest comes with the next request.
  }
  out.end();
  await once(out, 'close');
  return behind <= closing;
}
