import { existsSync } from 'node:fs';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';

const CHROMIUM = ['/usr/bin/chromium', '/usr/bin/chromium-browser'].find((file) => existsSync(file));

/** Debian's chromium, headless, told not to talk to anybody but the page's own servers. */
export function launchBrowser(): Promise<Browser> {
  if (!CHROMIUM) throw new Error('chromium is not installed; as root: apt-get install chromium');
  return chromium.launch({
    executablePath: CHROMIUM,
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  });
}

/** A page that watches itself: requests to other hosts and errors on the console are kept and must be none. */
export interface WatchedPage {
  readonly page: Page;
  readonly context: BrowserContext;
  /** Outside requests and console errors seen so far, as sentences. */
  readonly faults: string[];
  close(): Promise<void>;
}

export async function openPage(
  browser: Browser,
  options: { width?: number; height?: number; dark?: boolean; ignore?: RegExp } = {},
): Promise<WatchedPage> {
  const context = await browser.newContext({
    viewport: { width: options.width ?? 1440, height: options.height ?? 900 },
    colorScheme: options.dark ? 'dark' : 'light',
    reducedMotion: 'reduce',
  });
  const page = await context.newPage();
  page.setDefaultTimeout(60_000);
  const faults: string[] = [];
  page.on('request', (request) => {
    const { hostname, protocol } = new URL(request.url());
    if (/^(https?|wss?):$/.test(protocol) && hostname !== '127.0.0.1' && hostname !== 'localhost') {
      faults.push(`request to an outside host: ${request.url()}`);
    }
  });
  page.on('pageerror', (error) => faults.push(`error in the page: ${error.message}`));
  page.on('console', (message) => {
    if (message.type() === 'error' && !options.ignore?.test(message.text())) {
      faults.push(`console error: ${message.text()}`);
    }
  });
  return { page, context, faults, close: () => context.close() };
}

/** Signs in through the page's form. */
export async function signIn(page: Page, url: string, name: string, password: string): Promise<void> {
  await page.goto(`${url}/sign-in`);
  await page.getByLabel(/login name or e-mail/i).fill(name);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: /^sign in$/i }).click();
  await page.waitForURL((to) => !to.pathname.startsWith('/sign-in'));
}
