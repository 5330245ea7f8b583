import 'server-only';

/**
 * The network address that a request came from. The last entry is the one that the nearest proxy (or Next itself) wrote;
 * those before it are whatever the client claimed.
 */
export function clientAddress(headers: Headers): string {
  return headers.get('x-forwarded-for')?.split(',').at(-1)?.trim() || 'unknown';
}
