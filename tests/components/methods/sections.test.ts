import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import katex from 'katex';
import { expect, test } from 'vitest';
import { CHI2_95_ONE } from '@/analysis/estimators/profile-interval';
import { freeMsd } from '@/analysis/spectrum/models';
import { expectedDiffusion, BOLTZMANN } from '@/analysis/physics/stokes-einstein';
import { remarks, sections } from '@/components/methods/sections';

const ANALYSIS = path.resolve(import.meta.dirname, '../../../analysis');

test('every remark that the engine can make is explained, and no other', () => {
  const codes = new Set<string>();
  for (const folder of ['verdict/warnings.ts', 'input/prepare.ts', 'checks/checks.ts']) {
    const text = readFileSync(path.join(ANALYSIS, folder), 'utf8');
    for (const match of text.matchAll(/(?:look|problem|say)\(\s*'([a-z-]+)'|code: '([a-z-]+)',\s*level:/g))
      codes.add((match[1] ?? match[2])!);
  }
  expect(codes.size).toBeGreaterThan(15);
  expect(Object.keys(remarks).sort()).toEqual([...codes].sort());
});

test('every formula can be set', () => {
  let count = 0;
  for (const { parts } of sections)
    for (const part of parts) {
      const all = typeof part === 'string' ? part.split('$').filter((_, at) => at % 2 === 1) : [part.tex];
      for (const tex of all) {
        count += 1;
        expect(katex.renderToString(tex, { throwOnError: true, strict: 'error' })).toContain('<math');
      }
    }
  expect(count).toBeGreaterThan(15);
});

test('what the page says is what the code computes', () => {
  const words = JSON.stringify(sections);
  expect(words).toContain(CHI2_95_ONE.toFixed(3));
  expect(words).toContain((BOLTZMANN * 1e23).toFixed(6));
  // MSD = 2D(nΔt − eΔt/3) per axis.
  expect(freeMsd(0.6)(5)).toBeCloseTo(2 * (5 - 0.6 / 3), 12);
  expect(expectedDiffusion(25, 0.89, 1)).toBeCloseTo(
    ((BOLTZMANN * 298.15) / (3 * Math.PI * 0.89e-3 * 1e-6)) * 1e12,
    9,
  );
});

test('no section is without its sources, and ids are those that blocks link to', () => {
  for (const { sources } of sections) expect(sources.length).toBeGreaterThan(0);
  const ids = sections.map(({ id }) => id);
  expect(new Set(ids).size).toBe(ids.length);
  const block = readdirSync(path.resolve(import.meta.dirname, '../../../components/diffusion-block'))
    .map((name) =>
      readFileSync(path.resolve(import.meta.dirname, '../../../components/diffusion-block', name), 'utf8'),
    )
    .join('\n');
  const linked = [...block.matchAll(/\/methods#([a-z]+)/g)].map((match) => match[1]!);
  expect(linked.length).toBeGreaterThan(2);
  for (const id of linked) expect(ids).toContain(id);
});
