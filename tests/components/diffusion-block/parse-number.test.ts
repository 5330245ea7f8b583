import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { conflictOf, parseNumber, type NumberSetting } from '@/components/diffusion-block/parse-number';
import { blockAttributes } from '@/db/inputs/block-settings';
import { attributesOf } from './some-results';

describe('numbers as people type them', () => {
  test.each([
    ['0.02', 0.02],
    [' 0,02 ', 0.02],
    ['2e-3', 0.002],
    ['.5', 0.5],
    ['12.', 12],
    ['0,125', 0.125],
    ['1,5', 1.5],
    ['', null],
  ])('%j is %j', (text, value) => {
    expect(parseNumber(text, 'exposureSeconds')).toEqual({ value });
  });

  test('a temperature below zero may have any minus', () => {
    for (const text of ['-5', '−5', '–5']) expect(parseNumber(text, 'temperature')).toEqual({ value: -5 });
    expect(Object.is((parseNumber('-0', 'temperature') as { value: number }).value, 0)).toBe(true);
  });

  test.each(['abc', '0x10', '1 2', '1.2.3', 'Infinity', 'NaN', '1e', '1_000', '1,2,3', '½'])(
    '%j is no number',
    (text) => {
      expect(parseNumber(text, 'exposureSeconds')).toEqual({ error: 'Enter a number, such as 0.02.' });
    },
  );

  test('what could be read in two ways is asked again', () => {
    for (const text of ['1,000', '12,500', '1,000,000']) {
      expect(parseNumber(text, 'minTrackFrames')).toMatchObject({
        error: expect.stringContaining('thousands'),
      });
    }
  });

  test.each([
    ['minTrackFrames', '1', 'whole number from 2'],
    ['minTrackFrames', '2.5', 'whole number from 2'],
    ['exposureFraction', '1.1', 'from 0 to 1'],
    ['exposureSeconds', '0', 'above zero'],
    ['sigma', '-0.1', 'zero or'],
    ['temperature', '200', '150 °C'],
    ['particleDiameter', '-1', 'above zero'],
    ['viscosity', '1e999', 'above zero'],
    ['fitLagFirst', '0', 'from 1'],
  ] satisfies [NumberSetting, string, string][])(
    '%s of %j says what it must be',
    (setting, text, sentence) => {
      expect(parseNumber(text, setting)).toMatchObject({ error: expect.stringContaining(sentence) });
    },
  );

  test('whatever is typed, only what the document may hold comes out', () => {
    const settings: NumberSetting[] = ['sigma', 'temperature', 'minTrackFrames', 'exposureFraction'];
    const typed = fc.oneof(fc.string(), fc.double().map(String), fc.stringMatching(/^[-+0-9.,eE−]{0,8}$/));
    fc.assert(
      fc.property(typed, fc.constantFrom(...settings), (text, setting) => {
        const parsed = parseNumber(text, setting);
        if ('error' in parsed) return parsed.error.length > 0;
        return parsed.value === null || blockAttributes[setting].safeParse(parsed.value).success;
      }),
    );
  });
});

test('the last lag must lie beyond the first, whichever of them is changed', () => {
  const block = attributesOf({ fitLagFirst: 3, fitLagLast: 8 });
  expect(conflictOf(block, 'fitLagLast', 3)).toMatch(/larger than the first/);
  expect(conflictOf(block, 'fitLagLast', 4)).toBeNull();
  expect(conflictOf(block, 'fitLagFirst', 8)).toMatch(/larger than the first/);
  expect(conflictOf(block, 'fitLagFirst', null)).toBeNull();
  expect(conflictOf(attributesOf(), 'fitLagLast', 1)).toMatch(/larger than the first/);
  expect(conflictOf(block, 'sigma', 0)).toBeNull();
});
