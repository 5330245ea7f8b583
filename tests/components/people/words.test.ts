import { expect, test } from 'vitest';
import { accountInWords, browserInWords, roleInWords } from '../../../components/people/words';

test('a role is said with the flag', () => {
  expect(roleInWords({ role: 'pi', admin: false })).toBe('PI');
  expect(roleInWords({ role: 'researcher', admin: true })).toBe('researcher, administrator');
});

test('a closed account is closed, whether or not it was ever used', () => {
  expect(accountInWords({ active: false, invited: true })).toBe('closed');
  expect(accountInWords({ active: true, invited: true })).toBe('invited');
  expect(accountInWords({ active: true, invited: false })).toBe('open');
});

// Forms of User-Agent as browsers send them (from memory).
test.each([
  ['Mozilla/5.0 (X11; Linux x86_64; rv:140.0) Gecko/20100101 Firefox/140.0', 'Firefox on Linux'],
  [
    'Mozilla/5.0 (Windows NT 10.0; Win64; x64) AppleWebKit/537.36 (KHTML, like Gecko) Chrome/138.0.0.0 Safari/537.36 Edg/138.0',
    'Edge on Windows',
  ],
  [
    'Mozilla/5.0 (Linux; Android 15) AppleWebKit/537.36 (KHTML, like Gecko) Chrome/138.0 Mobile Safari/537.36',
    'Chromium on Android',
  ],
  [
    'Mozilla/5.0 (iPhone; CPU iPhone OS 18_0 like Mac OS X) AppleWebKit/605.1 Version/18.0 Mobile Safari/604.1',
    'Safari on iPhone',
  ],
  ['curl/8.5', 'An unknown browser'],
  ['', 'An unknown browser'],
])('%j is shown as %s', (userAgent, words) => expect(browserInWords(userAgent)).toBe(words));
