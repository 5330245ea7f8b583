import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { launchBrowser, type WatchedPage } from './browser';
import { bodyText, chooseFile, openAs, openTodaysEntry, ready, saved, useReading, write } from './entry-page';
import { goldenFile } from './trajectory-files';

/** Two people at one entry, in two browsers. */
let browser: Browser;
let noor: WatchedPage;
let keita: WatchedPage;
let entry: string;

/** The browser itself reports on the console that there is no network. */
const ignore = /ERR_INTERNET_DISCONNECTED|WebSocket connection to|Failed to fetch/;

beforeAll(async () => {
  browser = await launchBrowser();
  noor = await openAs(browser, 'noor', { ignore });
  keita = await openAs(browser, 'keita', { ignore });
  await noor.context.addInitScript(rememberSockets);
  entry = await openTodaysEntry(noor.page);
  await keita.page.goto(entry);
  await ready(keita.page);
});
afterAll(() => browser.close());

/** Runs in the page, before its scripts: the sockets that it opens can be broken by a test. */
function rememberSockets(): void {
  const sockets: WebSocket[] = [];
  Object.assign(window, { sockets });
  window.WebSocket = class extends WebSocket {
    constructor(url: string | URL, protocols?: string | string[]) {
      super(url, protocols);
      sockets.push(this);
    }
  };
}

async function goOffline({ context, page }: WatchedPage): Promise<void> {
  await context.setOffline(true);
  await page.evaluate(() => {
    for (const socket of (window as unknown as { sockets: WebSocket[] }).sockets) socket.close();
  });
}

const shows = (page: Page, words: string) => page.locator('.ProseMirror', { hasText: words }).waitFor();

describe('two people', () => {
  test('see each other type, each beside a caret with the name of its account, and are listed in the margin', async () => {
    await write(noor.page, 'Noor was here. ');
    await shows(keita.page, 'Noor was here.');
    await write(keita.page, 'Keita too. ');
    await shows(noor.page, 'Keita too.');
    await noor.page.locator('.ProseMirror').getByText('Keita Salvesen', { exact: true }).waitFor();
    await keita.page.locator('.ProseMirror').getByText('Noor Vantongeren', { exact: true }).waitFor();
    await noor.page.getByRole('list', { name: 'Also here' }).getByText('Keita Salvesen').waitFor();
    await Promise.all([saved(noor.page), saved(keita.page)]);
  });

  test('a broken line is said at once; what both type meanwhile is kept and comes together when it is back', async () => {
    await goOffline(noor);
    await noor.page.getByText('Offline', { exact: true }).waitFor();
    await keita.page.getByRole('list', { name: 'Also here' }).waitFor({ state: 'detached' });
    await write(noor.page, 'Typed without a line. ');
    await noor.page.getByText('Offline, not saved yet', { exact: true }).waitFor();
    await write(keita.page, 'Typed in the meantime. ');
    await saved(keita.page);
    expect(await bodyText(keita.page)).not.toContain('Typed without a line.');

    await noor.context.setOffline(false);
    await saved(noor.page);
    await shows(keita.page, 'Typed without a line.');
    await shows(noor.page, 'Typed in the meantime.');
    for (const { page } of [noor, keita]) {
      const text = await bodyText(page);
      for (const words of ['Typed without a line.', 'Typed in the meantime.'])
        expect(text.split(words).length - 1).toBe(1);
    }
    // Seen again without having to type first.
    await keita.page.getByRole('list', { name: 'Also here' }).getByText('Noor Vantongeren').waitFor();
    await keita.page.reload();
    await shows(keita.page, 'Typed without a line.');
    await ready(keita.page);
  });

  test('both change the settings of a block at once: two settings both stand, of one setting the same value everywhere', async () => {
    await chooseFile(noor.page, goldenFile('g02_free_2d_noise_blur.csv'));
    await useReading(noor.page);
    await keita.page.locator('[data-block-status="done"]').last().waitFor();
    const pages = [noor.page, keita.page];
    const blockOf = (page: Page) => page.locator('.diffusion-block').last();
    const fold = (page: Page) => blockOf(page).getByRole('button', { name: /^Settings:/ });
    const field = (page: Page, label: RegExp) => blockOf(page).getByLabel(label);
    for (const page of pages) await fold(page).click();
    const set = async (page: Page, label: RegExp, value: string) => {
      await field(page, label).fill(value);
      await field(page, label).press('Enter');
    };
    const agreed = async (label: RegExp): Promise<string> => {
      const deadline = Date.now() + 30_000;
      for (;;) {
        const [one, other] = await Promise.all(pages.map((page) => field(page, label).inputValue()));
        if (one === other && one !== '') return one ?? '';
        if (Date.now() > deadline) throw new Error(`${label.source} stayed apart: ${one}, ${other}`);
        await new Promise((resolve) => setTimeout(resolve, 100));
      }
    };

    await Promise.all([set(noor.page, /^Temperature/, '25'), set(keita.page, /^Particle diameter/, '1')]);
    expect(await agreed(/^Temperature/)).toBe('25');
    expect(await agreed(/^Particle diameter/)).toBe('1');

    await Promise.all([set(noor.page, /^Temperature/, '20'), set(keita.page, /^Temperature/, '30')]);
    await Promise.all(pages.map(saved));
    // Saved on both sides means that each has the other's edit or will have it at once; then nothing moves any more.
    await noor.page.waitForTimeout(300);
    const temperature = await agreed(/^Temperature/);
    expect(['20', '30']).toContain(temperature);

    // Settings in words, and what came of them; charts are drawn when their turn comes.
    const shown = (page: Page) =>
      Promise.all([
        fold(page).innerText(),
        blockOf(page)
          .innerText()
          .then((text) => /D\s=\s[^\n]*/.exec(text)?.[0]),
        blockOf(page).locator('[data-block-status="done"]').count(),
      ]);
    await expect
      .poll(async () => JSON.stringify(await shown(noor.page)) === JSON.stringify(await shown(keita.page)), {
        timeout: 30_000,
      })
      .toBe(true);
    const [sentence, result] = await shown(noor.page);
    expect(sentence).toContain(temperature);
    expect(result).toMatch(/µm²\/s/);
  });

  test('neither page has met an error or asked any other host', () => {
    expect([...noor.faults, ...keita.faults]).toEqual([]);
  });
});
