import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest';
import { DEMO_PASSWORD } from '../../db/setup/demo-accounts';
import { brokenRules } from './accessibility';
import { launchBrowser, openPage, signIn } from './browser';

/** The frame around the work: who gets in, what a page answers, and that it can be used in both themes and by anybody. */
const url = inject('productUrl');
let browser: Browser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

async function as<T>(
  login: string,
  run: (page: Page) => Promise<T>,
  options: Parameters<typeof openPage>[1] = {},
): Promise<T> {
  const watched = await openPage(browser, options);
  try {
    await signIn(watched.page, url, login, DEMO_PASSWORD);
    const result = await run(watched.page);
    expect(watched.faults).toEqual([]);
    return result;
  } finally {
    await watched.close();
  }
}

/** An entry and a notebook of the demo, by an address that its owner sees. */
const addresses = () =>
  as('noor', async (page) => {
    const entry = await page.locator('a[href^="/entries/"]').first().getAttribute('href');
    await page.goto(`${url}/notebooks`);
    const notebook = await page.locator('a[href^="/notebooks/"]').first().getAttribute('href');
    return { entry: entry ?? '', notebook: notebook ?? '' };
  });

describe('signing in', () => {
  test('a visitor is led to the sign-in page and, signed in, to where they wanted to go', async () => {
    const { page, close, faults } = await openPage(browser);
    await page.goto(`${url}/notebooks?from=mail`);
    expect(new URL(page.url()).pathname).toBe('/sign-in');
    await page.getByRole('button', { name: /Noor Vantongeren/ }).click();
    await page.getByRole('button', { name: /^sign in$/i }).click();
    await page.waitForURL(`${url}/notebooks?from=mail`);
    expect(faults).toEqual([]);
    await close();
  });

  test('a wrong password is said beside the field, and what was typed stays', async () => {
    // The browser itself reports the refused request on the console.
    const { page, close, faults } = await openPage(browser, { ignore: /status of 401/ });
    await page.goto(`${url}/sign-in`);
    await page.getByRole('button', { name: /^sign in$/i }).click();
    await page.getByText('Enter your login name or e-mail address.').waitFor();
    await page.getByLabel(/login name/i).fill('noor');
    await page.getByLabel('Password', { exact: true }).fill('not the one');
    await page.keyboard.press('Enter');
    await page.getByText('Login name or password is not right.').waitFor();
    expect(await page.getByLabel(/login name/i).inputValue()).toBe('noor');
    expect(await page.getByLabel('Password', { exact: true }).inputValue()).toBe('not the one');
    expect(await page.getByLabel('Password', { exact: true }).getAttribute('aria-invalid')).toBe('true');
    expect(faults).toEqual([]);
    await close();
  });

  test.each(['https://elsewhere.example/', '//elsewhere.example', '/\\elsewhere.example'])(
    'a return address %s leads to Today',
    async (elsewhere) => {
      const { page, close, faults } = await openPage(browser);
      await page.goto(`${url}/sign-in?callbackUrl=${encodeURIComponent(elsewhere)}`);
      await page.getByRole('button', { name: /Keita/ }).click();
      await page.getByRole('button', { name: /^sign in$/i }).click();
      await page.waitForURL(`${url}/`);
      expect(faults).toEqual([]);
      await close();
    },
  );

  test('signing out ends it for this browser, and a page that is still open says so when it is used', async () => {
    const watched = await openPage(browser);
    const { page, context } = watched;
    await signIn(page, url, 'marenko', DEMO_PASSWORD);
    const stale = await context.newPage();
    await stale.goto(url);
    const start = stale.getByRole('button', { name: /start today.s entry/i }).first();
    await start.waitFor();
    await page.getByRole('button', { name: /your account/ }).click();
    await page.getByRole('menuitem', { name: 'Sign out' }).click();
    await page.waitForURL(/\/sign-in/);
    await page.goto(`${url}/notebooks`);
    expect(new URL(page.url()).pathname).toBe('/sign-in');
    await start.click();
    await stale.getByText(/please sign in/i).waitFor();
    expect(watched.faults).toEqual([]);
    await watched.close();
  });
});

describe('who sees what', () => {
  test('to an outsider, though an administrator, an entry and a notebook are not there', async () => {
    const { entry, notebook } = await addresses();
    const watched = await openPage(browser, { ignore: /status of 404/ });
    await signIn(watched.page, url, 'mateus', DEMO_PASSWORD);
    for (const path of [entry, notebook, '/entries/00000000-0000-4000-8000-000000000000', '/notebooks/TRB']) {
      const answer = await watched.page.goto(url + path);
      expect([path, answer?.status()]).toEqual([path, 404]);
      await watched.page.getByRole('heading', { name: 'There is nothing here that you may see' }).waitFor();
    }
    expect(watched.faults).toEqual([]);
    await watched.close();
  });

  test('a guest reads the notebook, and is offered nothing to write with', async () => {
    const { notebook } = await addresses();
    await as('rosalind', async (page) => {
      await page.goto(url + notebook);
      await page.getByRole('table', { name: /^Entries of/ }).waitFor();
      expect(await page.getByRole('button', { name: /start today/i }).count()).toBe(0);
      await page.goto(url);
      await page.getByText('You read what is shared with you here.').waitFor();
      expect(await page.getByRole('button', { name: /start today/i }).count()).toBe(0);
    });
  });

  test('a title and a date are saved where they stand', async () => {
    await as('keita', async (page) => {
      await page.locator('a[href^="/entries/"]').first().click();
      const title = page.getByLabel('Title', { exact: true });
      const saved = () =>
        page.waitForResponse((answer) => answer.request().method() === 'POST' && answer.ok());
      await title.waitFor();
      const before = await title.inputValue();
      // Saved after a pause in typing, without leaving the field.
      await Promise.all([saved(), title.fill(`${before}, again`)]);
      await page.reload();
      expect(await title.inputValue()).toBe(`${before}, again`);
      await title.fill(before);
      await Promise.all([saved(), title.press('Enter')]);
      await page.getByRole('button', { name: /^Experiment date/ }).click();
      await page.getByLabel('Experiment date', { exact: true }).press('Escape');
      await page.getByRole('button', { name: /^Experiment date/ }).waitFor();
    });
  });
});

describe('what a page answers', () => {
  test('pages and files carry the security headers; scripts need the nonce of their page', async () => {
    const page = await fetch(`${url}/sign-in`);
    const policy = page.headers.get('content-security-policy') ?? '';
    const nonce = /'nonce-([^']+)'/.exec(policy)?.[1];
    expect(policy).not.toMatch(/script-src[^;]*unsafe-(inline|eval)/);
    for (const part of [
      "object-src 'none'",
      "base-uri 'none'",
      "frame-ancestors 'none'",
      "form-action 'self'",
    ]) {
      expect(policy).toContain(part);
    }
    const html = await page.text();
    const scripts = [...html.matchAll(/<script\b[^>]*>/g)].map(([tag]) => tag);
    expect(scripts.length).toBeGreaterThan(0);
    for (const tag of scripts) expect(tag).toContain(`nonce="${nonce}"`);
    expect(page.headers.get('cache-control')).toContain('no-store');

    const style = /href="(\/_next\/static\/[^"]+\.css[^"]*)"/.exec(html)?.[1];
    for (const answer of [page, await fetch(url + style), await fetch(`${url}/nowhere`)]) {
      expect(answer.headers.get('x-content-type-options')).toBe('nosniff');
      expect(answer.headers.get('referrer-policy')).toBe('same-origin');
      expect(answer.headers.get('cross-origin-opener-policy')).toBe('same-origin');
      expect(answer.headers.get('cross-origin-resource-policy')).toBe('same-origin');
      expect(answer.headers.get('permissions-policy')).toContain('camera=()');
    }
  });

  test('another name of this machine leads to the one that the cookie belongs to', async () => {
    const answer = await fetch(`${url.replace('127.0.0.1', 'localhost')}/notebooks?x=1`, {
      redirect: 'manual',
    });
    expect(answer.status).toBe(307);
    expect(answer.headers.get('location')).toBe(`${url}/notebooks?x=1`);
  });
});

describe.each([
  ['light', 1440],
  ['dark', 1440],
  ['light', 390],
  ['dark', 1024],
] as const)('in the %s theme, %d px wide', (theme, width) => {
  test('no page breaks a rule of WCAG 2.2 AA that can be checked by axe-core, or is wider than the window', async () => {
    const { notebook } = await addresses();
    await as(
      'noor',
      async (page) => {
        for (const path of ['/', '/notebooks', notebook]) {
          await page.goto(url + path);
          await page.getByRole('heading', { level: 1 }).first().waitFor();
          expect([path, await brokenRules(page)]).toEqual([path, []]);
          expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBe(width);
        }
      },
      { width, dark: theme === 'dark' },
    );
  });
});
