import type { IncomingMessage } from 'node:http';
import { appendSinglePart, type Arrival } from './multipart';

/**
 * Uploads under way, one a file. Whoever comes back for a file has lost the line it came on before; that one is ended
 * first, so that what it still brings neither mixes with what follows nor makes the count of bytes untrue.
 */
export class Incoming {
  private readonly lines = new Map<string, { request: IncomingMessage; done: Promise<Arrival> }>();

  /** Ends what still comes in for a file, and waits until its last byte is written. */
  async breakOff(key: string): Promise<void> {
    for (let line = this.lines.get(key); line; line = this.lines.get(key)) {
      line.request.destroy();
      await line.done;
    }
  }

  /** Takes in one part; to be called without a wait after `breakOff`. */
  async receive(
    request: IncomingMessage,
    key: string,
    part: { boundary: string; file: string; expected: number },
  ) {
    const done = appendSinglePart(request, part.boundary, part.file, part.expected).finally(() =>
      this.lines.delete(key),
    );
    this.lines.set(key, { request, done });
    return done;
  }
}
