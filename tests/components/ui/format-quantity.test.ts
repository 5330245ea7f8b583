import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  fixed,
  formatEstimate,
  formatNumber,
  powerOfTen,
  quantityText,
} from '@/components/ui/format-quantity';

const thin = '\u2009';

/**
 * Rules of print checked here: The International System of Units (SI brochure, BIPM, 9th edition 2019), section 5.4.3
 * (a space between number and unit) and 5.4.5 (digits of value and uncertainty agree); ISO 80000-1 asks for the minus sign proper. From memory.
 * Two digits of uncertainty: JCGM 100:2008 (GUM), section 7.2.6 ("it usually suffices to quote u to at most two significant digits").
 */
describe('an estimate', () => {
  const cases: [string, [number, number | null, number | null], string][] = [
    ['the product’s own example', [0.43149, 0.4181, 0.4449], '0.431 (0.418–0.445)'],
    ['a wide interval loses decimals', [0.4, 0.1, 0.9], '0.40 (0.10–0.90)'],
    ['half width 0.0996 counts as 0.10', [1, 0.9004, 1.0996], '1.00 (0.90–1.10)'],
    ['tens', [1234, 1110, 1360], '1230 (1110–1360)'],
    ['hundreds', [98_765, 97_000, 100_500], '98800 (97000–100500)'],
    ['a dash is not set before a minus', [-0.5, -0.9, -0.1], '\u22120.50 (\u22120.90 to \u22120.10)'],
    ['an open upper end', [2, 1.5, null], '2.00 (above 1.50)'],
    ['an open lower end', [2, null, 2.5], '2.00 (below 2.50)'],
    ['no interval', [0.43149, null, null], '0.431'],
    ['zero at the boundary', [0, 0, 0.012], '0.0000 (0.0000–0.0120)'],
  ];
  test.each(cases)('%s', (_name, [value, lo, hi], expected) => {
    const { value: shown, interval, scale } = formatEstimate(value, lo, hi);
    expect(scale).toBe('');
    expect(interval === null ? shown : `${shown} (${interval})`).toBe(expected);
  });

  test('very small and very large values share one power of ten', () => {
    expect(formatEstimate(4.31e-6, 4.18e-6, 4.45e-6)).toEqual({
      value: '4.31',
      interval: '4.18–4.45',
      scale: `${thin}×${thin}10⁻⁶`,
    });
    expect(formatEstimate(4.31e7, 4.2e7, 4.4e7).scale).toBe(`${thin}×${thin}10⁷`);
  });

  test('what is printed is the number, to half a unit of its last digit, for any estimate', () => {
    const positive = fc.double({ min: 1e-4, max: 1e5, noNaN: true });
    fc.assert(
      fc.property(positive, fc.double({ min: 0.001, max: 0.9, noNaN: true }), (value, part) => {
        const { value: shown, scale } = formatEstimate(value, value * (1 - part), value * (1 + part));
        const power = scale === '' ? 1 : 10 ** exponentIn(scale);
        expect(Math.abs(Number(shown) * power - value)).toBeLessThanOrEqual(
          value * part * 0.051 + 1e-12 * value,
        );
      }),
    );
  });

  test('two significant digits of the half width, never three', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 100, noNaN: true }),
        fc.integer({ min: 10, max: 99 }),
        (value, two) => {
          const half = two / 1000;
          const { interval } = formatEstimate(value + 1, value + 1 - half, value + 1 + half);
          expect(interval?.split('–')[0]?.split('.')[1]).toHaveLength(3);
        },
      ),
    );
  });

  test('numbers that cannot be printed are refused', () => {
    expect(() => formatEstimate(Number.NaN, 0, 1)).toThrow(RangeError);
    expect(() => formatEstimate(1, 2, 0)).toThrow('interval from 2 to 0');
    expect(() => formatNumber(Number.POSITIVE_INFINITY, 2)).toThrow(RangeError);
    expect(() => formatNumber(1, 0)).toThrow('0 significant digits');
  });
});

const back = {
  '⁻': '-',
  '⁰': '0',
  '¹': '1',
  '²': '2',
  '³': '3',
  '⁴': '4',
  '⁵': '5',
  '⁶': '6',
  '⁷': '7',
  '⁸': '8',
  '⁹': '9',
};
const exponentIn = (scale: string) =>
  Number([...scale.slice(scale.indexOf('10') + 2)].map((sign) => back[sign as keyof typeof back]).join(''));

describe('a number', () => {
  test.each([
    [0.43149, 2, '0.43'],
    [0.0996, 2, '0.10'],
    [1260, 3, '1260'],
    [-3.14159, 3, '\u22123.14'],
    [0, 3, '0'],
    [0.00012, 2, '0.00012'],
    [0.000012, 2, `1.2${thin}×${thin}10⁻⁵`],
    [6.02214076e23, 4, `6.022${thin}×${thin}10²³`],
    [999.96, 4, '1000'],
  ])('%d with %d digits is %s', (value, digits, expected) => {
    expect(formatNumber(value, digits)).toBe(expected);
  });

  test('a value that rounds to nothing has no sign', () => {
    expect(fixed(-0.0004, 2)).toBe('0.00');
    expect(fixed(-0.4, 1)).toBe('\u22120.4');
  });

  test('powers of ten', () => {
    expect(powerOfTen(-12)).toBe(`${thin}×${thin}10⁻¹²`);
    expect(powerOfTen(3)).toBe(`${thin}×${thin}10³`);
  });
});

test('a quantity as text, with symbol, unit and interval', () => {
  expect(quantityText({ symbol: 'D', value: 0.43149, lo: 0.4181, hi: 0.4449, unit: 'µm²/s' })).toBe(
    `D = 0.431${thin}µm²/s (0.418–0.445)`,
  );
  expect(quantityText({ value: 25, unit: '' })).toBe('25.0');
});
