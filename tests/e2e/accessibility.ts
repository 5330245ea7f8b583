import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { Page } from 'playwright-core';

const axe = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');
declare const globalThis: {
  axe: { run(root: unknown, options: unknown): Promise<{ violations: Violation[] }> };
};
interface Violation {
  id: string;
  help: string;
  nodes: { html: string; failureSummary: string }[];
}

/** What a page breaks of those rules of WCAG 2.2 AA that axe-core can check, in short: rule, where, why. */
export async function brokenRules(page: Page): Promise<string[]> {
  await page.evaluate(axe);
  const { violations } = await page.evaluate(() =>
    globalThis.axe.run(document, { runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'] }),
  );
  return violations.flatMap(({ id, help, nodes }) =>
    nodes.map((node) => `${id}: ${help}\n  ${node.html.slice(0, 300)}\n  ${node.failureSummary}`),
  );
}
