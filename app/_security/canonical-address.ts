import { isLoopback } from '@/db/env';

/** Request header in which the proxy hands the full address to the layout, which redirects to it. */
export const CANONICAL_HEADER = 'x-motebook-canonical';

/**
 * Where a request should have gone: a machine has several names for itself (localhost, 127.0.0.1), but a cookie belongs to
 * one. Only reading requests to another loopback name are led over; everything else stays where it is.
 * @param request.host - the Host header, e.g. "localhost:4310". @param request.path - path and query, starting with "/".
 * @param request.canonical - the public address, e.g. "http://127.0.0.1:4310".
 * @returns the full address, or null when the request is where it belongs.
 */
export function canonicalAddress(request: {
  method: string;
  host: string | null;
  path: string;
  canonical: string;
}): string | null {
  const canonical = new URL(request.canonical);
  if (request.method !== 'GET' && request.method !== 'HEAD') return null;
  if (request.host === null || request.host.toLowerCase() === canonical.host) return null;
  const asked = `http://${request.host}`;
  if (!URL.canParse(asked)) return null;
  if (!isLoopback(new URL(asked).hostname) || !isLoopback(canonical.hostname)) return null;
  // Put together from the origin, so that a path such as "//elsewhere" cannot name another host.
  return canonical.origin + request.path;
}
