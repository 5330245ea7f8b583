import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { safeReturnPath } from '@/app/_security/return-path';

describe('the place to return to after signing in', () => {
  test.each(['/', '/notebooks', '/entries/abc?x=1#block-2', '/measurements?dFrom=0.3&dTo=0.6'])(
    '%s is kept',
    (path) => {
      expect(safeReturnPath(path)).toBe(path);
    },
  );

  // The spellings that OWASP ASVS 5.0 (3.7.2) and the URL standard (WHATWG, "special schemes" and tab removal) warn of.
  test.each([
    '//elsewhere.example',
    '/\\elsewhere.example',
    '\\\\elsewhere.example',
    'https:elsewhere.example',
    'https://elsewhere.example/',
    'javascript:alert(1)',
    '/\t/elsewhere.example',
    '/\n/elsewhere.example',
    '/.//elsewhere.example',
    '/sign-in',
    '/sign-in?callbackUrl=/sign-in',
    '/api/auth/signout',
    '',
    `/${'x'.repeat(3000)}`,
    undefined,
    ['/notebooks'],
  ])('%j leads home', (asked) => {
    expect(safeReturnPath(asked)).toBe('/');
  });

  test('whatever is asked for, a browser stays on this origin', () => {
    const parts = fc.constantFrom(
      '/',
      '\\',
      '.',
      '..',
      ':',
      '@',
      'a',
      '%2f',
      '%5c',
      '\t',
      '\n',
      '#',
      '?',
      'https:',
      'x.example',
    );
    fc.assert(
      fc.property(fc.array(parts, { maxLength: 8 }), (pieces) => {
        const path = safeReturnPath(pieces.join(''));
        expect(new URL(path, 'http://127.0.0.1:4310').origin).toBe('http://127.0.0.1:4310');
      }),
      { numRuns: 2000 },
    );
  });
});
