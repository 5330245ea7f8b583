import { afterAll, beforeAll, describe, expect, inject, test } from 'vitest';
import type { Browser } from 'playwright-core';
import { launchBrowser, openPage, type WatchedPage } from './browser';

/**
 * What is read on a page must look the same on every machine: no sign that the product prints may fall to a font of the
 * system. The browser itself says which font files drew a text (DevTools protocol, CSS.getPlatformFontsForNode).
 */
let browser: Browser;
let watched: WatchedPage;
beforeAll(async () => {
  browser = await launchBrowser();
  watched = await openPage(browser);
  await watched.page.goto(`${inject('productUrl')}/sign-in`);
});
afterAll(async () => {
  await watched.close();
  await browser.close();
});

const SIGNS: Record<string, string> = {
  'Latin letters, figures and accents': 'Motebook 0123456789 àéîõüßæøåčřžłśțőğ',
  'Greek letters': 'αβγδηθλμνπρστφχψω ΔΓΛΣΩ',
  'superscripts and subscripts': '⁻¹ ² ³ ⁴ ⁵ ⁶ ₀ ₁ ₂',
  'mathematical signs': '− × ± √ ≈ ≤ ≥ ∞ ∝ ∑ ≠ →',
  'units and quotation marks': 'µm²/s °C – — … “ ” ‘ ’ ·',
  'spaces that keep a value and its unit together': 'a\u202Fb\u2009c\u00A0d',
};

describe.each(['serif', 'sans'])('in the %s family', (family) => {
  test.each(Object.entries(SIGNS))('%s come from shipped files', async (_what, text) => {
    const { page, context } = watched;
    await page.evaluate(
      ([signs, name]) => {
        document.querySelector('#signs')?.remove();
        const element = document.createElement('p');
        element.id = 'signs';
        element.style.fontFamily = `var(--${name})`;
        element.textContent = signs as string;
        document.body.append(element);
        return document.fonts.load(`16px ${getComputedStyle(element).fontFamily}`, signs as string);
      },
      [text, family],
    );
    await page.evaluate(() => document.fonts.ready);
    const session = await context.newCDPSession(page);
    await session.send('DOM.enable');
    await session.send('CSS.enable');
    const { root } = await session.send('DOM.getDocument');
    const { nodeId } = await session.send('DOM.querySelector', { nodeId: root.nodeId, selector: '#signs' });
    const { fonts } = await session.send('CSS.getPlatformFontsForNode', { nodeId });
    await session.detach();
    expect(fonts.length).toBeGreaterThan(0);
    expect(fonts.filter((font) => !font.isCustomFont).map((font) => font.familyName)).toEqual([]);
  });
});

test('they come from this server', () => {
  expect(watched.faults).toEqual([]);
});
