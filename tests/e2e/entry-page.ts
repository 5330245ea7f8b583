import { inject } from 'vitest';
import type { Browser, Page } from 'playwright-core';
import { DEMO_PASSWORD } from '../../db/setup/demo-accounts';
import { openPage, signIn, type WatchedPage } from './browser';
import type { DroppedFile } from './trajectory-files';

/** What journeys do on an entry's page, in the words of the page. */

/** A browser of its own for one person of the demo, signed in. */
export async function openAs(
  browser: Browser,
  login: string,
  options: Parameters<typeof openPage>[1] = {},
): Promise<WatchedPage> {
  const watched = await openPage(browser, options);
  await signIn(watched.page, inject('productUrl'), login, DEMO_PASSWORD);
  return watched;
}

/** Opens the person's entry of today, and starts it where there is none. @returns its address. */
export async function openTodaysEntry(page: Page): Promise<string> {
  await page.goto(inject('productUrl'));
  await page
    .getByRole('button', { name: /start today.s entry/i })
    .or(page.getByRole('link', { name: /open today.s entry/i }))
    .first()
    .click();
  await page.waitForURL(/\/entries\/[0-9a-f-]{36}/);
  await ready(page);
  return page.url().split('#')[0]!;
}

/** Waits until the text has arrived and can be written in. */
export async function ready(page: Page): Promise<void> {
  await page.locator('.ProseMirror[contenteditable="true"]').waitFor();
}

export const saved = (page: Page) => page.getByText('Saved', { exact: true }).waitFor();

/** Types at the end of the text. */
export async function write(page: Page, words: string): Promise<void> {
  await page.locator('.ProseMirror').focus();
  await page.keyboard.press('Control+End');
  await page.keyboard.type(words);
}

export const bodyText = (page: Page) => page.locator('.ProseMirror').innerText();

export const chooseFile = (page: Page, file: DroppedFile) =>
  page.getByLabel('Trajectory file', { exact: true }).setInputFiles(file);

/** Confirms what the intake dialog shows, and waits for the block's numbers. @returns the newest block. */
export async function useReading(page: Page) {
  const dialog = page.getByRole('dialog');
  const before = await page.locator('.diffusion-block').count();
  await dialog.getByRole('button', { name: 'Use this reading' }).click();
  await dialog.waitFor({ state: 'hidden' });
  const block = page.locator('.diffusion-block').nth(before);
  await block.locator('[data-block-status="done"]').waitFor();
  return block;
}
