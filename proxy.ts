import { randomBytes } from 'node:crypto';
import { NextResponse, type NextRequest } from 'next/server';
import { CANONICAL_HEADER, canonicalAddress } from '@/app/_security/canonical-address';
import { contentSecurityPolicy } from '@/app/_security/content-security-policy';
import { PATH_HEADER } from '@/app/_security/path-header';
import { env } from '@/db/env';

/**
 * Runs before every page: leads other names of this machine to the one that the sign-in cookie belongs to, and gives the
 * answer its security headers. It is not a lock: who may see what is asked in each page, action and route.
 */
export function proxy(request: NextRequest): NextResponse {
  const { NEXTAUTH_URL, MOTEBOOK_WS_URL, MOTEBOOK_FILES_ORIGIN } = env();
  const path = request.nextUrl.pathname + request.nextUrl.search;
  const elsewhere = canonicalAddress({
    method: request.method,
    host: request.headers.get('host'),
    path,
    canonical: NEXTAUTH_URL,
  });

  const nonce = randomBytes(16).toString('base64');
  const policy = contentSecurityPolicy({
    nonce,
    wsUrl: MOTEBOOK_WS_URL,
    filesOrigin: MOTEBOOK_FILES_ORIGIN,
    development: process.env.NODE_ENV === 'development',
  });
  // Next reads the nonce from the request's policy and stamps its own scripts with it.
  const headers = new Headers(request.headers);
  headers.set('Content-Security-Policy', policy);
  headers.set('x-nonce', nonce);
  headers.set(PATH_HEADER, path);
  // The layout redirects: from here a redirect would lose its host, because Next takes all loopback names for one.
  if (elsewhere) headers.set(CANONICAL_HEADER, elsewhere);
  else headers.delete(CANONICAL_HEADER);
  const response = NextResponse.next({ request: { headers } });
  response.headers.set('Content-Security-Policy', policy);
  response.headers.set('Cache-Control', 'private, no-store');
  if (NEXTAUTH_URL.startsWith('https:')) {
    response.headers.set('Strict-Transport-Security', 'max-age=63072000');
  }
  return response;
}

/** Pages only: routes under /api answer data and set their own headers; files of the build never change. */
export const config = {
  matcher: ['/((?!api/|_next/static|_next/image|icon\\.svg|favicon\\.ico).*)'],
};
