import { readFileSync } from 'node:fs';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, beforeEach, expect, test } from 'vitest';
import { MAX_UPLOAD_BYTES } from '../../db/files/policy';
import { launchBrowser, type WatchedPage } from './browser';
import { bodyText, chooseFile, openAs, openTodaysEntry, saved, useReading, write } from './entry-page';
import { goldenFile, pictureNamedCsv, withDecimalCommas } from './trajectory-files';

/**
 * Files that are not what the page hopes for. Each is answered with its place and the remedy, and the text that was there
 * stays. Golden numbers: tests/fixtures/golden/golden.json, by an independent program.
 */
const TYPED = 'Written before the files came.';
const golden = JSON.parse(
  readFileSync(new URL('../fixtures/golden/golden.json', import.meta.url), 'utf8'),
) as { cases: Record<string, { truth: { D: number }; reference: { mle?: { D_mle: number } } }> };
let browser: Browser;
let keita: WatchedPage;

beforeAll(async () => {
  browser = await launchBrowser();
  // The browser itself reports an upload that was refused.
  keita = await openAs(browser, 'keita', { ignore: /status of (400|413)/ });
  await openTodaysEntry(keita.page);
  await write(keita.page, TYPED);
  await saved(keita.page);
});
afterAll(() => browser.close());
beforeEach(async () => {
  expect(await bodyText(keita.page)).toContain(TYPED);
  expect(await keita.page.getByRole('dialog').count()).toBe(0);
});

/** D of the newest block, µm²/s. */
const shownD = (text: string) => Number(/D\s=\s([\d.]+)/.exec(text)?.[1]);

test('a picture that is called .csv is named as what it is, with what to do, and makes no block', async () => {
  const { page } = keita;
  const blocks = await page.locator('[data-block-status]').count();
  await chooseFile(page, pictureNamedCsv());
  const dialog = page.getByRole('dialog', { name: 'beads.csv' });
  await dialog.getByText(/looks like a picture \(PNG\)/i).waitFor();
  expect(await dialog.innerText()).toMatch(/export|choose/i);
  expect(await dialog.getByRole('button', { name: 'Use this reading' }).count()).toBe(0);
  await dialog.getByRole('button', { name: 'Close' }).last().click();
  await page.getByText('"beads.csv" stays with this entry; no block was made of it.').waitFor();
  expect(await page.locator('[data-block-status]').count()).toBe(blocks);
});

test('a file in pixels and frames asks for both scales in the form, says what is wrong with an answer, and works', async () => {
  const { page } = keita;
  await chooseFile(page, goldenFile('g13_pixels_frames.csv'));
  const dialog = page.getByRole('dialog');
  await dialog
    .getByText(/does not say the (frame interval and the pixel size|pixel size and the frame interval)/)
    .waitFor();
  const use = dialog.getByRole('button', { name: 'Use this reading' });
  expect(await use.isDisabled()).toBe(true);
  const interval = dialog.getByLabel(/^Frame interval/);
  const pixel = dialog.getByLabel(/^Pixel size/);
  expect([await interval.inputValue(), await pixel.inputValue()]).toEqual(['', '']);
  expect(await interval.getAttribute('required')).not.toBeNull();
  await interval.fill('forty');
  await expectInvalid(interval);
  expect(await use.isDisabled()).toBe(true);
  // A decimal comma is understood as well.
  await interval.fill('0,04');
  await pixel.fill('0.107');
  await dialog.getByText(/0\.04 s from frame to frame/).waitFor();
  const block = await useReading(page);
  // Truth of the file: 0.4 µm²/s; within the spread of estimates from so many steps (standard error about 0.024).
  const { D } = golden.cases.g13_pixels_frames!.truth;
  expect(Math.abs(shownD(await block.innerText()) - D)).toBeLessThan(0.1);
});

test('semicolons and decimal commas are understood as the same numbers', async () => {
  const { page } = keita;
  const commas = withDecimalCommas(goldenFile('g02_free_2d_noise_blur.csv'), 'g02 mit Komma.csv');
  await chooseFile(page, commas);
  const dialog = page.getByRole('dialog');
  await dialog.getByText('Separated by semicolons, decimal comma').waitFor();
  const block = await useReading(page);
  const reference = golden.cases.g02_free_2d_noise_blur!.reference.mle!.D_mle;
  expect(shownD(await block.innerText())).toBe(Number(reference.toPrecision(3)));
});

test('a row that cannot be read is told with its line, and the others are used', async () => {
  const { page } = keita;
  const file = goldenFile('g02_free_2d_noise_blur.csv');
  const lines = file.buffer.toString('utf8').split('\n');
  const x = lines[0]!.split(',').findIndex((name) => /^x/.test(name));
  lines[6] = lines[6]!.split(',').with(x, 'lost').join(',');
  await chooseFile(page, { ...file, name: 'one-bad-row.csv', buffer: Buffer.from(lines.join('\n')) });
  const dialog = page.getByRole('dialog', { name: 'one-bad-row.csv' });
  const fold = dialog.getByText('1 row could not be used');
  await fold.click();
  const row = dialog.getByRole('region', { name: 'Rows that could not be used' }).locator('tbody tr');
  expect(await row.locator('td').first().innerText()).toBe('7');
  expect(await row.innerText()).toContain('lost');
  await dialog.getByRole('button', { name: 'Not now' }).click();
});

test.each([
  ['just over the limit', MAX_UPLOAD_BYTES + 1],
  ['over what the upload service would take, too', 33 * 1024 * 1024],
])(
  'a file %s is refused by its name and size before it is sent, with what to do instead',
  async (_how, size) => {
    const { page } = keita;
    await chooseFile(page, {
      name: 'whole-night.csv',
      mimeType: 'text/csv',
      buffer: Buffer.alloc(size, '1,2\n'),
    });
    const upload = page.getByRole('list', { name: 'Uploads' }).getByRole('listitem');
    const alert = upload.getByRole('alert');
    await alert.waitFor();
    const said = await alert.innerText();
    expect(said).toContain('whole-night.csv');
    expect(said).toMatch(/\d+\.\d MB/);
    expect(said).toContain(`${MAX_UPLOAD_BYTES / 1024 / 1024} MB`);
    expect(said).toMatch(/split it|fewer/);
    await upload.getByRole('button', { name: 'Leave it' }).click();
    expect(await upload.count()).toBe(0);
  },
);

test('after all that the text stands, and neither an error nor another host was met', async () => {
  await saved(keita.page);
  await keita.page.reload();
  await keita.page.locator('.ProseMirror', { hasText: TYPED }).waitFor();
  expect(await keita.page.locator('.diffusion-block').count()).toBe(2);
  expect(keita.faults).toEqual([]);
});

async function expectInvalid(field: { getAttribute(name: string): Promise<string | null> }): Promise<void> {
  const deadline = Date.now() + 20_000;
  while ((await field.getAttribute('aria-invalid')) !== 'true') {
    if (Date.now() > deadline) throw new Error('the field never said that it is wrong');
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
}
