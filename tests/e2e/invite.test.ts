import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { DEMO_PASSWORD } from '../../db/setup/demo-accounts';
import { brokenRules } from './accessibility';
import { launchBrowser, openPage, signIn, type WatchedPage } from './browser';

const url = inject('productUrl');
const NEW_PASSWORD = 'seven grey beads drift slowly';
let browser: Browser;
const opened: WatchedPage[] = [];
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(async () => {
  for (const one of opened) await one.close();
  await browser.close();
});

async function visit(options: Parameters<typeof openPage>[1] = {}): Promise<WatchedPage> {
  const watched = await openPage(browser, options);
  opened.push(watched);
  return watched;
}

/** Looks at the demo's mail until one with a link has come for this address. */
async function linkFor(page: Page, address: string): Promise<string> {
  const deadline = Date.now() + 40_000;
  for (;;) {
    await page.goto(`${url}/mail`);
    const article = page.locator('article', { hasText: address }).first();
    const link = article.getByRole('link');
    if ((await article.count()) > 0 && (await link.count()) > 0) {
      return (await link.first().getAttribute('href')) ?? '';
    }
    if (Date.now() > deadline) throw new Error(`no mail with a link came for ${address}`);
    await new Promise((resolve) => setTimeout(resolve, 300));
  }
}

test('an invited person finds the mail, sets a password, signs in, and is gone when the account is closed', async () => {
  const admin = await visit();
  await signIn(admin.page, url, 'mateus', DEMO_PASSWORD);
  await admin.page.goto(`${url}/people`);
  expect(await brokenRules(admin.page)).toEqual([]);
  await admin.page.getByRole('button', { name: 'Invite a person' }).click();
  const dialog = admin.page.getByRole('dialog');
  await dialog.getByLabel('Name', { exact: true }).fill('Tuva Ekedal');
  await dialog.getByLabel('E-mail').fill('tuva');
  await dialog.getByLabel('Login name').fill('noor');
  await dialog.getByRole('button', { name: 'Send the invitation' }).click();
  await dialog.getByText('Give an e-mail address, such as name@lab.example.').waitFor();
  expect(await dialog.getByLabel('Name', { exact: true }).inputValue()).toBe('Tuva Ekedal');
  await dialog.getByLabel('E-mail').fill('tuva@tarnfield.example');
  await dialog.getByRole('button', { name: 'Send the invitation' }).click();
  await dialog.getByText(/Somebody has the login name noor/).waitFor();
  expect(await brokenRules(admin.page)).toEqual([]);
  await dialog.getByLabel('Login name').fill('tuva');
  await dialog.getByRole('button', { name: 'Send the invitation' }).click();
  await dialog.waitFor({ state: 'detached' });
  await admin.page.getByText('Tuva Ekedal is invited.').waitFor();
  await admin.page.getByRole('listitem').filter({ hasText: 'tuva' }).getByText('Account invited').waitFor();

  const tuva = await visit({ ignore: /status of (401|429)/ });
  const link = await linkFor(tuva.page, 'tuva@tarnfield.example');
  await tuva.page.goto(link);
  const password = tuva.page.getByLabel('New password');
  await password.fill('too short');
  await tuva.page.getByRole('button', { name: 'Set the password' }).click();
  await tuva.page.getByText(/at least 15 characters; a few words in a row/).waitFor();
  expect(await brokenRules(tuva.page)).toEqual([]);
  await password.fill(NEW_PASSWORD);
  await tuva.page.getByRole('button', { name: 'Set the password' }).click();
  await tuva.page.getByText('Your login name is tuva.').waitFor();
  expect(new URL(tuva.page.url()).hash).toBe('');

  // The link has done its work.
  await tuva.page.goto(`${url}/sign-in`);
  await tuva.page.goto(link);
  await tuva.page.getByLabel('New password').fill(NEW_PASSWORD);
  await tuva.page.getByRole('button', { name: 'Set the password' }).click();
  await tuva.page.getByText('This link has expired or was used already.').waitFor();

  await signIn(tuva.page, url, 'tuva@tarnfield.example', NEW_PASSWORD);
  await tuva.page.goto(`${url}/profile`);
  await tuva.page.getByRole('heading', { name: 'Your profile' }).waitFor();
  expect(await brokenRules(tuva.page)).toEqual([]);
  expect((await tuva.page.goto(`${url}/people`))?.status()).toBe(404);

  await admin.page.reload();
  await admin.page.getByRole('link', { name: 'Tuva Ekedal' }).click();
  await admin.page.getByRole('heading', { name: 'Tuva Ekedal' }).waitFor();
  expect(await brokenRules(admin.page)).toEqual([]);
  await admin.page.getByRole('button', { name: 'Close the account' }).click();
  await admin.page.getByRole('dialog').getByLabel('Reason').fill('left the group');
  await admin.page.getByRole('dialog').getByRole('button', { name: 'Close the account' }).click();
  await admin.page.getByRole('button', { name: 'Open the account again' }).waitFor();
  await tuva.page.goto(`${url}/notebooks`);
  expect(new URL(tuva.page.url()).pathname).toBe('/sign-in');
  expect(admin.faults).toEqual([]);
});

test('after five wrong passwords the sign-in page says how long to wait; a reset by mail lets one in', async () => {
  const { page } = await visit({ ignore: /status of (401|429)/ });
  await page.goto(`${url}/sign-in`);
  const attempt = async () => {
    await page.getByLabel(/login name or e-mail/i).fill('keita');
    await page.getByLabel('Password', { exact: true }).fill('not the right one at all');
    const answer = page.waitForResponse((one) => one.url().endsWith('/callback/credentials'));
    await page.getByRole('button', { name: /^sign in$/i }).click();
    return answer;
  };
  for (let i = 0; i < 5; i++) {
    expect((await attempt()).status()).toBe(401);
    await page.getByText('Login name or password is not right.').waitFor();
  }
  const stopped = await attempt();
  expect(stopped.status()).toBe(429);
  expect(Number(stopped.headers()['retry-after'])).toBeGreaterThan(0);
  await page.getByText(/Too many attempts\. Wait (10|9) minutes and try again\./).waitFor();

  await page.getByRole('link', { name: 'Forgotten your password?' }).click();
  // Both pages have a field of this name.
  await page.getByRole('heading', { name: 'Forgotten your password?' }).waitFor();
  await page.getByLabel('Login name or e-mail').fill('keita');
  await page.getByRole('button', { name: 'Send me a link' }).click();
  await page.getByText('If somebody here has this name').waitFor();
  expect(await brokenRules(page)).toEqual([]);
  await page.goto(await linkFor(page, 'keita@tarnfield.example'));
  // The other journeys sign in as this person, too.
  await page.getByLabel('New password').fill(DEMO_PASSWORD);
  await page.getByRole('button', { name: 'Set the password' }).click();
  await page.getByText('Your login name is keita.').waitFor();
  await signIn(page, url, 'keita', DEMO_PASSWORD);
});
