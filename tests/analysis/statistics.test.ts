import { describe, expect, test } from 'vitest';
import { chiSquareQuantile, chiSquareTail, complementaryError } from '../../analysis/statistics/chi-square';
import { chiSquareTailOf, logGamma } from '../../analysis/statistics/gamma';
import { apart } from './golden';

describe('tails of the normal and χ² laws', () => {
  test.each([
    // NIST Digital Library of Mathematical Functions / Abramowitz & Stegun table 7.1 and 7.3, erfc(z).
    [0, 1],
    [0.5, 0.4795001221869535],
    [1, 0.15729920705028513],
    [2, 0.004677734981047266],
    [3, 2.209049699858544e-5],
    [5, 1.5374597944280349e-12],
  ])('erfc(%d)', (z, expected) => {
    expect(apart(complementaryError(z), expected)).toBeLessThan(1e-12);
  });

  test.each([
    // NIST/SEMATECH e-Handbook 1.3.6.7.4, upper critical values of χ².
    [1, 0.05, 3.841],
    [2, 0.05, 5.991],
    [3, 0.05, 7.815],
    [1, 0.001, 10.828],
    [2, 0.001, 13.816],
    [3, 0.001, 16.266],
  ] as const)('χ² with %i degrees of freedom, upper %d', (d, p, expected) => {
    expect(chiSquareQuantile(d, p)).toBeCloseTo(expected, 3);
    expect(chiSquareTail(d, chiSquareQuantile(d, p))).toBeCloseTo(p, 12);
  });

  test('medians, which robust scales rest on', () => {
    expect(chiSquareQuantile(1, 0.5)).toBeCloseTo(0.454936, 6);
    expect(chiSquareQuantile(2, 0.5)).toBeCloseTo(1.386294, 6);
    expect(chiSquareQuantile(3, 0.5)).toBeCloseTo(2.365974, 6);
  });

  test.each([
    // The same handbook table: 10, 30 and 100 degrees of freedom, upper 5 % and 0.1 %.
    [10, 18.307, 0.05],
    [30, 43.773, 0.05],
    [100, 124.342, 0.05],
    [10, 29.588, 0.001],
    [100, 149.449, 0.001],
  ])('χ² with %i degrees of freedom above %d', (n, x, p) => {
    expect(apart(chiSquareTailOf(n, x), p)).toBeLessThan(2e-3);
  });

  test('the general tail meets the three plain ones', () => {
    for (const d of [1, 2, 3] as const)
      for (const x of [0.1, 1, 3, 10, 40])
        expect(apart(chiSquareTailOf(d, x), chiSquareTail(d, x))).toBeLessThan(1e-11);
  });

  test('ln Γ of whole numbers is that of factorials', () => {
    let factorial = 0;
    for (let n = 1; n <= 30; n++) {
      expect(logGamma(n)).toBeCloseTo(factorial, 10);
      factorial += Math.log(n);
    }
    expect(logGamma(0.5)).toBeCloseTo(Math.log(Math.sqrt(Math.PI)), 12);
  });

  test('what has no answer is refused', () => {
    expect(() => complementaryError(-1)).toThrow(RangeError);
    expect(() => chiSquareQuantile(2, 0)).toThrow(RangeError);
  });
});
