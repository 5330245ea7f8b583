import type { z } from 'zod';
import { ERRORS, type Refusal } from '@/db/errors';
import { RefusedError } from './query-provider';

/**
 * Asks one of the product's own routes and checks the answer's shape.
 * @throws RefusedError - the server's sentence, ready to be shown; also when no server could be reached, and when the
 * answer is not what this page understands (the product was renewed while the page was open).
 */
export async function fetchJson<Shape extends z.ZodType>(
  path: string,
  shape: Shape,
  options: { body?: unknown; signal?: AbortSignal } = {},
): Promise<z.output<Shape>> {
  const response = await send(path, options);
  const answer: unknown = await response.json().catch((error: unknown) => {
    // What is no JSON is not understood; any other fault is one of the line, in the middle of the answer.
    if (error instanceof SyntaxError) return null;
    throw lineFault(error);
  });
  const parsed = shape.safeParse(answer);
  if (parsed.success) return parsed.data;
  console.error(`answer of ${path} not understood`, parsed.error);
  throw new RefusedError(502, 'This page and the server do not fit together any more. Reload the page.', {});
}

/** The same for an answer that is a file. */
export async function fetchFile(path: string, options: { body?: unknown }): Promise<Blob> {
  return (await send(path, options)).blob();
}

async function send(path: string, options: { body?: unknown; signal?: AbortSignal }): Promise<Response> {
  const init: RequestInit = { signal: options.signal ?? null };
  if (options.body !== undefined) {
    init.method = 'POST';
    init.body = JSON.stringify(options.body);
    init.headers = { 'Content-Type': 'application/json' };
  }
  let response: Response;
  try {
    response = await fetch(path, init);
  } catch (error) {
    throw lineFault(error);
  }
  if (response.ok) return response;
  const refusal = (await response.json().catch(() => null)) as Refusal | null;
  throw new RefusedError(
    response.status,
    refusal?.sentence ?? ERRORS.unexpected.sentence,
    refusal?.fields ?? {},
  );
}

/** A request that this page gave up itself stays what it is; otherwise the line is at fault. */
function lineFault(error: unknown): unknown {
  if ((error as Error).name === 'AbortError') return error;
  return new RefusedError(503, 'The server cannot be reached. Check the connection, then try again.', {});
}
