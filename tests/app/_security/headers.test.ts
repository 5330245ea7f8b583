import { NextRequest } from 'next/server';
import { beforeAll, describe, expect, test, vi } from 'vitest';
import { canonicalAddress } from '@/app/_security/canonical-address';
import { contentSecurityPolicy } from '@/app/_security/content-security-policy';

const canonical = 'http://127.0.0.1:4310';
const asked = (over: Partial<Parameters<typeof canonicalAddress>[0]>) =>
  canonicalAddress({ method: 'GET', host: 'localhost:4310', path: '/notebooks?x=1', canonical, ...over });

describe('another name of this machine', () => {
  test('a page asked for at localhost is found at the address that the cookie belongs to', () => {
    expect(asked({})).toBe('http://127.0.0.1:4310/notebooks?x=1');
    expect(asked({ host: '[::1]:4310' })).toBe('http://127.0.0.1:4310/notebooks?x=1');
    expect(asked({ path: '//elsewhere.example' })).toBe('http://127.0.0.1:4310//elsewhere.example');
  });

  test.each([
    ['the canonical name itself', { host: '127.0.0.1:4310' }],
    ['a change', { method: 'POST' }],
    ['another host', { host: 'elsewhere.example' }],
    ['no host', { host: null }],
    ['a broken host', { host: 'local host:::' }],
    ['a server that is not on loopback', { canonical: 'https://notebook.example' }],
  ])('%s stays', (_what, over) => {
    expect(asked(over)).toBeNull();
  });
});

describe('content security policy', () => {
  const made = (development = false) =>
    contentSecurityPolicy({
      nonce: 'Zm9v',
      wsUrl: 'ws://127.0.0.1:4311/live',
      filesOrigin: 'http://127.0.0.1:4312',
      development,
    });
  const directive = (policy: string, name: string) =>
    policy
      .split('; ')
      .find((part) => part.startsWith(`${name} `))
      ?.slice(name.length + 1);

  // OWASP ASVS 5.0, 3.4.3 and 3.4.6 (from memory): nonce or hashes, no inline scripts, no framing, no plug-ins, fixed base.
  test('scripts need the nonce, and neither inline code nor eval is allowed', () => {
    expect(directive(made(), 'script-src')).toBe("'self' 'nonce-Zm9v' 'strict-dynamic'");
    expect(directive(made(true), 'script-src')).toContain("'unsafe-eval'");
    for (const name of ['object-src', 'base-uri', 'frame-ancestors', 'frame-src']) {
      expect(directive(made(), name)).toBe("'none'");
    }
    expect(directive(made(), 'form-action')).toBe("'self'");
  });

  test('the page talks to itself, the live server and the file service only', () => {
    expect(directive(made(), 'connect-src')).toBe("'self' ws://127.0.0.1:4311 http://127.0.0.1:4312");
    expect(directive(made(), 'default-src')).toBe("'self'");
  });
});

describe('the proxy', () => {
  beforeAll(() => {
    vi.stubEnv('NEXTAUTH_URL', canonical);
    vi.stubEnv('NEXTAUTH_SECRET', 'x'.repeat(32));
    vi.stubEnv('MOTEBOOK_WS_URL', 'ws://127.0.0.1:4311');
    vi.stubEnv('MOTEBOOK_FILES_ORIGIN', 'http://127.0.0.1:4312');
    vi.stubEnv('MOTEBOOK_DATABASE_APP', 'postgres://nobody@127.0.0.1/none');
    vi.stubEnv('UPLOADTHING_TOKEN', 'none');
    vi.stubEnv('MOTEBOOK_CACHE', '/nowhere');
  });
  const answer = async (host: string) => {
    const { proxy } = await import('@/proxy');
    return proxy(new NextRequest(`http://${host}/notebooks`, { headers: { host } }));
  };

  test('a page is never kept by a cache and has a new nonce each time', async () => {
    const [one, other] = [await answer('127.0.0.1:4310'), await answer('127.0.0.1:4310')];
    expect(one.headers.get('cache-control')).toBe('private, no-store');
    const nonce = (response: Response) =>
      /'nonce-([^']+)'/.exec(response.headers.get('content-security-policy') ?? '')?.[1];
    expect(nonce(one)).toMatch(/^[A-Za-z0-9+/]{22}==$/);
    expect(nonce(one)).not.toBe(nonce(other));
  });

  test('the layout is told where a request to localhost belongs', async () => {
    const response = await answer('localhost:4310');
    expect(response.headers.get('x-middleware-request-x-motebook-canonical')).toBe(
      'http://127.0.0.1:4310/notebooks',
    );
  });

  test('nobody can name the address from outside', async () => {
    const { proxy } = await import('@/proxy');
    const response = proxy(
      new NextRequest('http://127.0.0.1:4310/notebooks', {
        headers: { host: '127.0.0.1:4310', 'x-motebook-canonical': 'https://elsewhere.example' },
      }),
    );
    expect(response.headers.get('x-middleware-override-headers')).not.toContain('x-motebook-canonical');
  });
});
