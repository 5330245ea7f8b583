import 'server-only';
import { db } from '@/db/client';
import { env } from '@/db/env';
import { settlePasswordAttempt, takePasswordAttempt } from '@/db/limits/sign-in';
import { SlowDown } from '@/db/limits/take-attempt';
import { sessionCookieName } from '@/db/session-cookie';
import { clientAddress } from './client-address';

type Handler = (request: Request, context: unknown) => Promise<Response>;

/**
 * Around next-auth's handler: a try of a password is counted before it is made, and answered with 429, Retry-After and a
 * sentence when there were too many (S07, S54). Everything else passes.
 */
export function countSignIn(handler: Handler): Handler {
  return async (request, context) => {
    if (request.method !== 'POST' || !new URL(request.url).pathname.endsWith('/callback/credentials'))
      return handler(request, context);
    const name = await readName(request.clone());
    const address = clientAddress(request.headers);
    try {
      await takePasswordAttempt(db(), name, address);
    } catch (error) {
      if (error instanceof SlowDown) return slowDown(error);
      throw error;
    }
    const response = await handler(request, context);
    if (isSignedIn(response)) await settlePasswordAttempt(db(), name, address);
    return response;
  };
}

/** The name as next-auth will read it: from a form or from JSON, by the content type. */
async function readName(request: Request): Promise<string> {
  const type = request.headers.get('content-type') ?? '';
  const body = await request.text();
  if (!type.includes('application/json')) return new URLSearchParams(body).getAll('name').at(-1) ?? '';
  try {
    const { name } = JSON.parse(body) as { name?: unknown };
    return typeof name === 'string' ? name : '';
  } catch {
    return '';
  }
}

function isSignedIn(response: Response): boolean {
  const cookie = sessionCookieName(env().NEXTAUTH_URL);
  return response.headers
    .getSetCookie()
    .some((one) => one.startsWith(`${cookie}=`) && !one.startsWith(`${cookie}=;`));
}

/** next-auth's client takes what to say from the query of `url`. */
function slowDown({ code, sentence, seconds }: SlowDown): Response {
  const url = new URL('/sign-in', env().NEXTAUTH_URL);
  url.searchParams.set('error', sentence);
  return Response.json(
    { code, sentence, fields: {}, url: url.href },
    { status: 429, headers: { 'Retry-After': String(seconds), 'Cache-Control': 'private, no-store' } },
  );
}
