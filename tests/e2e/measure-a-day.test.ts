import { readFileSync } from 'node:fs';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { DEMO_PASSWORD } from '../../db/setup/demo-accounts';
import { launchBrowser, openPage, signIn } from './browser';
import { newPlace, removePlace, startStack, type Stack } from './stack';
import { goldenFile } from './trajectory-files';

/**
 * The main job, from an empty page to a measured D that another person sees and anybody finds again, and that outlives
 * the product's being stopped. Golden file g02: free diffusion, D = 0.787 µm²/s by an independent program (golden.json).
 */
interface Golden {
  cases: Record<string, { reference: { mle: { D_mle: number } } }>;
}
const golden = JSON.parse(
  readFileSync(new URL('../fixtures/golden/golden.json', import.meta.url), 'utf8'),
) as Golden;
const referenceD = golden.cases.g02_free_2d_noise_blur!.reference.mle.D_mle;
/** As the page shows it; its spaces do not break lines. */
const shownD = new RegExp(`D\\s=\\s${referenceD.toPrecision(3)}\\sµm²/s`);

let place: Record<string, string>;
let stack: Stack;
let browser: Browser;

beforeAll(async () => {
  place = await newPlace({ demo: true });
  stack = await startStack(place);
  browser = await launchBrowser();
});
afterAll(async () => {
  await browser.close();
  await stack.stop();
  await removePlace(place);
});

describe('an experiment day', () => {
  test('type, drop a file, confirm, read D; another browser sees it live; Measurements finds it; a restart keeps it', async () => {
    const noor = await openPage(browser);
    await signIn(noor.page, stack.url, 'noor', DEMO_PASSWORD);
    await noor.page
      .getByRole('button', { name: /start today.s entry/i })
      .first()
      .click();
    await noor.page.waitForURL(/\/entries\/[0-9a-f-]{36}/);
    const entryUrl = noor.page.url().split('#')[0]!;

    // Until the text has come from the server nothing can be typed into it.
    const body = noor.page.locator('.ProseMirror[contenteditable="true"]');
    await body.click();
    await noor.page.keyboard.type('Beads in a sealed chamber, focus kept in the middle.');
    await noor.page.getByText('Saved', { exact: true }).waitFor();

    // Somebody else opens the same page and watches.
    const keita = await openPage(browser);
    await signIn(keita.page, stack.url, 'keita', DEMO_PASSWORD);
    await keita.page.goto(entryUrl);
    await keita.page.getByText('Beads in a sealed chamber').waitFor();
    await keita.page.locator('.ProseMirror[contenteditable="true"]').click();
    await keita.page.keyboard.press('Control+End');
    await keita.page.keyboard.type(' Second pair of eyes.');
    await noor.page.getByText('Second pair of eyes.').waitFor();

    await noor.page
      .locator('input[type="file"]')
      .first()
      .setInputFiles(goldenFile('g02_free_2d_noise_blur.csv'));
    const dialog = noor.page.getByRole('dialog');
    await dialog
      .getByText(/1,?000|999|frames/i)
      .first()
      .waitFor();
    await dialog.getByRole('button', { name: /use this reading/i }).click();
    await dialog.waitFor({ state: 'hidden' });

    for (const { page } of [noor, keita]) {
      const block = page.locator('[data-block-status="done"]').first();
      await block.waitFor();
      const text = await block.innerText();
      expect(text).toMatch(shownD);
      expect(text.toLowerCase()).toContain('free');
      await block.locator('figure svg, svg.marks').first().waitFor();
    }

    // Found again by its D, with a range that only this measurement meets.
    await noor.page.goto(`${stack.url}/measurements`);
    await noor.page.getByLabel(/from/i).first().fill('0.75');
    await noor.page.getByLabel(/^to/i).first().fill('0.82');
    await noor.page
      .locator(`a[href^="/entries/${entryUrl.split('/').at(-1)}"]`)
      .first()
      .waitFor();

    expect([...noor.faults, ...keita.faults]).toEqual([]);
    await noor.close();
    await keita.close();

    expect(await stack.stop()).toBe(0);
    stack = await startStack(place);
    const again = await openPage(browser);
    await signIn(again.page, stack.url, 'noor', DEMO_PASSWORD);
    await again.page.goto(entryUrl.replace(/^https?:\/\/[^/]+/, stack.url));
    await again.page.getByText('Second pair of eyes.').waitFor();
    const block = again.page.locator('[data-block-status="done"]').first();
    await block.waitFor();
    expect(await block.innerText()).toMatch(shownD);
    expect(again.faults).toEqual([]);
    await again.close();
  });
});
