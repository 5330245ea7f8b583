import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import * as Y from 'yjs';
import { CLOSE, FRAME, SCHEMA_VERSION } from '../../editor/close-codes';
import { FRAGMENT } from '../../editor/schema/index';
import { helloFrame, updateFrame } from '../../ws-server/frames';
import { launchBrowser } from './browser';
import { openAs } from './entry-page';

/** Who may read an entry and no more: a guest, whose role in the notebook is reader. */
let browser: Browser;
let entry: string;
const socketPort = inject('place').MOTEBOOK_WS_PORT;

beforeAll(async () => {
  browser = await launchBrowser();
  const noor = await openAs(browser, 'noor');
  entry = await entryWithBlock(noor.page);
  await noor.close();
});
afterAll(() => browser.close());

/** The newest entry of the demo's notebook that shows a finished block. */
async function entryWithBlock(page: Page): Promise<string> {
  const url = inject('productUrl');
  await page.goto(`${url}/measurements`);
  const link = page.locator('a[href^="/entries/"]').first();
  await link.waitFor();
  return `${url}${(await link.getAttribute('href'))!.split('#')[0]!}`;
}

/** In the page, with the page's own cookie: opens a socket, sends frames, tells what comes back. */
function speak(
  page: Page,
  path: string,
  frames: Uint8Array[],
): Promise<{ frames: number[][]; closed: number | null }> {
  return page.evaluate(
    ([address, bytes]) =>
      new Promise((resolve) => {
        const got: number[][] = [];
        const socket = new WebSocket(address);
        socket.binaryType = 'arraybuffer';
        const end = (closed: number | null) => resolve({ frames: got, closed });
        socket.onopen = () => {
          for (const frame of bytes) socket.send(new Uint8Array(frame));
        };
        socket.onmessage = ({ data }: MessageEvent<ArrayBuffer>) => {
          got.push([...new Uint8Array(data)]);
          // 100: acknowledged, 101: refused.
          if (got.at(-1)![0] === 100 || got.at(-1)![0] === 101) {
            end(null);
            socket.close();
          }
        };
        socket.onclose = ({ code }) => end(code);
      }),
    [`ws://127.0.0.1:${socketPort}${path}`, frames.map((frame) => [...frame])] as const,
  );
}

/** A paragraph by a new client, as an editor's page would send it. */
function forgedEdit(): Uint8Array[] {
  const doc = new Y.Doc();
  const paragraph = new Y.XmlElement('paragraph');
  paragraph.insert(0, [new Y.XmlText('Forged by a reader.')]);
  doc.getXmlFragment(FRAGMENT).insert(0, [paragraph]);
  return [helloFrame(doc.clientID, SCHEMA_VERSION, 1), updateFrame(Y.encodeStateAsUpdate(doc))];
}

test('a guest sees text and numbers of an entry live, but nothing on the page writes', async () => {
  const guest = await openAs(browser, 'rosalind');
  await guest.page.goto(entry);
  const block = guest.page.locator('[data-block-status="done"]').first();
  await block.waitFor();
  expect(await block.innerText()).toMatch(/D\s[=≤]\s[\d.]+/);
  await guest.page.getByText('You may read this entry.').waitFor();

  expect(await guest.page.locator('.ProseMirror').getAttribute('contenteditable')).toBe('false');
  for (const count of [
    guest.page.getByRole('toolbar').count(),
    guest.page.locator('input[type="file"]').count(),
    guest.page.getByRole('textbox', { name: 'Title' }).count(),
    guest.page.getByRole('textbox', { name: 'Caption' }).count(),
    guest.page.getByRole('button', { name: /remove this block/i }).count(),
  ])
    expect(await count).toBe(0);
  // The settings can be looked at; none of their controls can be changed.
  await block.getByRole('button', { name: /^Settings:/ }).click();
  const controls = block.locator('input, select, textarea');
  expect(await controls.count()).toBeGreaterThan(5);
  expect(await block.locator(':is(input, select, textarea):not(:disabled)').count()).toBe(0);

  // The words only: charts are drawn when their turn comes.
  const words = () => guest.page.locator('.ProseMirror > :not(.diffusion-block)').allInnerTexts();
  const before = await words();
  await guest.page.locator('.ProseMirror p').first().click();
  await guest.page.keyboard.type('a guest types');
  await guest.page.keyboard.press('Enter');
  expect(await words()).toEqual(before);
  expect(guest.faults).toEqual([]);
  await guest.close();
});

test("a guest's socket reads, but its edit is refused and reaches nobody", async () => {
  const guest = await openAs(browser, 'rosalind');
  const path = new URL(entry).pathname.replace('/entries', '');
  const answer = await speak(guest.page, path, forgedEdit());
  const refusal = answer.frames.find((frame) => frame[0] === FRAME.refused);
  expect(new TextDecoder().decode(new Uint8Array(refusal?.slice(3) ?? []))).toBe('forbidden');
  const noor = await openAs(browser, 'noor');
  await noor.page.goto(entry);
  await noor.page.locator('[data-block-status="done"]').first().waitFor();
  expect(await noor.page.locator('.ProseMirror').innerText()).not.toContain('Forged');
  expect([...guest.faults, ...noor.faults]).toEqual([]);
  await guest.close();
  await noor.close();
});

test('to an outsider, though an administrator, the socket says no more than that there is nothing', async () => {
  const outsider = await openAs(browser, 'mateus');
  const path = new URL(entry).pathname.replace('/entries', '');
  for (const to of [path, '/00000000-0000-4000-8000-000000000000']) {
    expect(await speak(outsider.page, to, forgedEdit())).toEqual({ frames: [], closed: CLOSE.unknown });
  }
  expect(outsider.faults).toEqual([]);
  await outsider.close();
});
