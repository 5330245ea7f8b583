/**
 * What a page may load and talk to. Scripts run only with this answer's nonce, or when such a script loads them; styles
 * may stand in the page, because menus, charts and the editor place things with them.
 * @param options.nonce - new for every answer. @param options.wsUrl, options.filesOrigin - from the environment.
 * @param options.development - the development server evaluates code to reload it.
 */
export function contentSecurityPolicy(options: {
  nonce: string;
  wsUrl: string;
  filesOrigin: string;
  development: boolean;
}): string {
  const ws = new URL(options.wsUrl);
  const files = new URL(options.filesOrigin).origin;
  const directives: Record<string, string[]> = {
    'default-src': ["'self'"],
    'script-src': [
      "'self'",
      `'nonce-${options.nonce}'`,
      "'strict-dynamic'",
      ...(options.development ? ["'unsafe-eval'"] : []),
    ],
    'style-src': ["'self'", "'unsafe-inline'"],
    'img-src': ["'self'", 'data:', 'blob:', files],
    'font-src': ["'self'"],
    'connect-src': ["'self'", `${ws.protocol}//${ws.host}`, files],
    'worker-src': ["'self'", 'blob:'],
    'frame-src': ["'none'"],
    'object-src': ["'none'"],
    'base-uri': ["'none'"],
    'frame-ancestors': ["'none'"],
    'form-action': ["'self'"],
  };
  return Object.entries(directives)
    .map(([name, sources]) => `${name} ${sources.join(' ')}`)
    .join('; ');
}
