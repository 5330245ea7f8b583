import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest';
import { brokenRules } from './accessibility';
import { launchBrowser, type WatchedPage } from './browser';
import { chooseFile, openAs, openTodaysEntry } from './entry-page';
import { goldenFile } from './trajectory-files';

/** Every main page, in both themes: its content policy holds, it asks nobody but this machine, and everybody can use it. */
const url = inject('productUrl');
let browser: Browser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

/** In the page, before its scripts: what the browser refuses because of the content policy. */
function rememberRefusals(): void {
  const refusals: string[] = [];
  Object.assign(window, { refusals });
  document.addEventListener('securitypolicyviolation', (event) =>
    refusals.push(
      `${event.effectiveDirective}: ${event.blockedURI} (${event.sourceFile}:${event.lineNumber})`,
    ),
  );
}
const refusals = (page: Page) =>
  page.evaluate(() => (window as unknown as { refusals: string[] }).refusals.slice());

/** Every address that the page asks for, sockets included. */
function watchRequests({ context, page }: WatchedPage): Set<string> {
  const hosts = new Set<string>();
  const note = (address: string) => {
    const { protocol, host } = new URL(address);
    if (!['data:', 'blob:'].includes(protocol)) hosts.add(host);
  };
  context.on('request', (request) => note(request.url()));
  page.on('websocket', (socket) => note(socket.url()));
  return hosts;
}
const port = (name: string) => `127.0.0.1:${inject('place')[name]}`;
const OURS = ['MOTEBOOK_PORT', 'MOTEBOOK_WS_PORT', 'MOTEBOOK_FILES_PORT'].map(port);

const blocksDrawn = (page: Page) =>
  page.locator('[data-block-status="done"] :is(figure svg, svg.marks)').first().waitFor();

describe.each(['light', 'dark'] as const)('in the %s theme', (theme) => {
  test('every main page keeps to its content policy, asks this machine only, and breaks no rule that axe-core can check', async () => {
    const noor = await openAs(browser, 'noor', { dark: theme === 'dark' });
    await noor.context.addInitScript(rememberRefusals);
    const hosts = watchRequests(noor);
    const { page } = noor;
    const look = async (place: string) => {
      // What the sticky tools happen to cover further down is a matter of where the page was scrolled to.
      await page.evaluate(() => scrollTo(0, 0));
      expect([place, await brokenRules(page)]).toEqual([place, []]);
      expect([place, await refusals(page)]).toEqual([place, []]);
      // Wide tables and figures scroll by themselves, never the page.
      const [is, has] = await page.evaluate(() => [document.documentElement.scrollWidth, window.innerWidth]);
      expect([place, is]).toEqual([place, has]);
    };
    const open = async (path: string) => {
      await page.goto(url + path);
      await page.getByRole('heading', { level: 1 }).first().waitFor();
    };

    await open('/');
    await look('Today');
    await open('/notebooks');
    await look('Notebooks');
    await open((await page.locator('a[href^="/notebooks/"]').first().getAttribute('href')) ?? '');
    await look('a notebook');
    await open('/measurements');
    const first = page.locator('a[href^="/entries/"]').first();
    await first.waitFor();
    await look('Measurements');
    await open('/measurements?dFrom=1000000');
    await look('Measurements without a finding');
    await open('/search?q=beads');
    await page.locator('mark').first().waitFor();
    await look('Search');
    await page.keyboard.press('Control+,');
    await page.getByRole('combobox').fill('beads');
    await page.getByRole('option').first().waitFor();
    await look('Go to');
    await page.keyboard.press('Escape');
    await open('/methods');
    await look('Methods');
    await open('/planner');
    await look('Planner');

    await open(((await page.goto(`${url}/measurements`)) && (await first.getAttribute('href'))) ?? '');
    await blocksDrawn(page);
    await look('an entry with a block');
    await page
      .getByRole('button', { name: /^Settings:/ })
      .first()
      .click();
    await look('the settings of a block');

    await openTodaysEntry(page);
    await chooseFile(page, goldenFile('g13_pixels_frames.csv'));
    const dialog = page.getByRole('dialog');
    await dialog.getByLabel(/^Pixel size/).waitFor();
    await look('the intake dialog that asks');
    await dialog.getByLabel(/^Pixel size/).fill('0,107');
    await dialog.getByLabel(/^Frame interval/).fill('0.04');
    await dialog.getByText(/from frame to frame/).waitFor();
    await look('the intake dialog that has understood');
    await page.keyboard.press('Escape');
    await dialog.waitFor({ state: 'hidden' });

    expect([...hosts].filter((host) => !OURS.includes(host))).toEqual([]);
    expect([...hosts].sort()).toEqual([...OURS].sort());
    expect(noor.faults).toEqual([]);
    await noor.close();
  });
});

test('the watch over the content policy would see a breach', async () => {
  const noor = await openAs(browser, 'noor', { ignore: /Content Security Policy/ });
  await noor.context.addInitScript(rememberRefusals);
  await noor.page.goto(url);
  await noor.page.evaluate(() => {
    const picture = new Image();
    picture.src = 'https://elsewhere.example/x.png';
    document.body.append(picture);
    document.body.insertAdjacentHTML('beforeend', '<button onclick="document.title=\'run\'">x</button>');
    (document.body.lastElementChild as HTMLButtonElement).click();
  });
  await expect
    .poll(async () => (await refusals(noor.page)).map((one) => one.split(':')[0]).sort(), { timeout: 20_000 })
    .toEqual(['img-src', 'script-src-attr']);
  expect(await noor.page.title()).not.toBe('run');
  await noor.close();
});
