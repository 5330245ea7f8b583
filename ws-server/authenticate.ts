import type { IncomingMessage } from 'node:http';
import { getToken } from 'next-auth/jwt';
import type { Database } from '../db/client';
import type { Actor } from '../db/policies/may';
import { findActor } from '../db/queries/login/find-actor';
import { sessionCookieName } from '../db/session-cookie';

export interface AuthenticateOptions {
  readonly db: Database;
  /** The product's public address: its origin is the only one that may open a socket. */
  readonly publicUrl: string;
  readonly secret: string;
}

/** Who opens a socket, or the HTTP status with which it is refused before any byte of a document. */
export async function authenticate(
  request: IncomingMessage,
  options: AuthenticateOptions,
): Promise<{ actor: Actor } | { status: 401 | 403 }> {
  if (request.headers.origin !== new URL(options.publicUrl).origin) return { status: 403 };
  const name = sessionCookieName(options.publicUrl);
  const cookies = parseCookies(request.headers.cookie ?? '');
  // next-auth reads cookies from a parsed object only; the type asks for a whole request.
  const token = await getToken({
    req: { headers: request.headers, cookies } as unknown as Parameters<typeof getToken>[0]['req'],
    secret: options.secret,
    cookieName: name,
  });
  if (typeof token?.loginId !== 'string') return { status: 401 };
  const actor = await findActor(options.db, token.loginId);
  return actor ? { actor } : { status: 401 };
}

function parseCookies(header: string): Record<string, string> {
  const cookies: Record<string, string> = {};
  for (const part of header.split(';')) {
    const at = part.indexOf('=');
    if (at > 0) cookies[part.slice(0, at).trim()] = part.slice(at + 1).trim();
  }
  return cookies;
}
