import { describe, expect, test } from 'vitest';
import { findRoot, minimise, minimiseOnGrid } from '../../analysis/fit/minimise';

describe('minimum of a function of one variable', () => {
  test('of a parabola, to the square root of the machine’s precision', () => {
    expect(minimise((x) => (x - 1.25) ** 2, -3, 10).x).toBeCloseTo(1.25, 7);
  });

  test('of x⁴ − x, which is at 4^(−1/3)', () => {
    expect(minimise((x) => x ** 4 - x, 0, 2).x).toBeCloseTo(4 ** (-1 / 3), 7);
  });

  test('at an end of the bracket, and where it is infinite beside', () => {
    expect(minimise((x) => x, 2, 5).x).toBeCloseTo(2, 6);
    expect(minimise((x) => (x < 1 ? Infinity : x), 0, 4).x).toBeCloseTo(1, 4);
  });

  test('the deeper of two dips is found on a grid', () => {
    const f = (x: number) => Math.min((x - 1) ** 2, (x - 6) ** 2 - 0.5);
    const found = minimiseOnGrid(f, [0, 1, 2, 3, 4, 5, 6, 7]);
    expect(found.x).toBeCloseTo(6, 5);
    expect(found.value).toBeCloseTo(-0.5, 9);
  });
});

describe('root of a function of one variable', () => {
  test('of cos x = x (0.739085…, the Dottie number; from memory)', () => {
    expect(findRoot((x) => Math.cos(x) - x, 0, 1, 1e-13)).toBeCloseTo(0.7390851332151607, 11);
  });

  test('where the slope differs a thousandfold on the two sides', () => {
    expect(findRoot((x) => Math.exp(20 * x) - 2, -5, 5)).toBeCloseTo(Math.log(2) / 20, 8);
  });

  test('without a change of sign it says so', () => {
    expect(() => findRoot((x) => x * x + 1, -1, 1)).toThrow('no sign change');
  });
});
