import { describe, expect, test } from 'vitest';
import { carried } from '../../../analysis/reach/carry';
import { chanceWithin, radiusHolding, rmsTravel, timeToSpread } from '../../../analysis/reach/spread';
import { apart } from '../golden';

describe('how far a free particle gets', () => {
  test('rms travel and the time for it undo each other (Einstein 1905: √(2dDt))', () => {
    expect(apart(rmsTravel(0.5, 8, 1), Math.sqrt(8))).toBeLessThan(1e-14);
    expect(apart(rmsTravel(0.5, 8, 3), Math.sqrt(24))).toBeLessThan(1e-14);
    for (const d of [1, 2, 3] as const) expect(timeToSpread(0.3, rmsTravel(0.3, 7, d), d)).toBeCloseTo(7, 12);
    // Berg, Random Walks in Biology: D = 1e-5 cm²/s goes 1e-4 cm in 5e-4 s along one axis.
    expect(timeToSpread(1000, 1, 1)).toBeCloseTo(5e-4, 15);
  });

  test.each([
    // Normal and χ² tables; the digits from a double-precision library.
    [0.5, 0.3829249225, 0.1175030974, 0.0308595958],
    [1, 0.6826894921, 0.3934693403, 0.1987480431],
    [2, 0.9544997361, 0.8646647168, 0.7385358701],
  ])('probability within %d·√(2Dt) for one, two and three axes', (rho, ...expected) => {
    const r = rho * Math.sqrt(2 * 0.7 * 3);
    expected.forEach((value, i) =>
      expect(chanceWithin(0.7, 3, r, (i + 1) as 1 | 2 | 3)).toBeCloseTo(value, 9),
    );
  });

  test.each([
    // Roots of χ² tables with 1, 2, 3 degrees of freedom.
    [1, 0.67449, 1.959964],
    [2, 1.17741, 2.447747],
    [3, 1.538172, 2.795483],
  ] as const)('median and 95 %% radius in %i dimensions', (d, median, most) => {
    expect(radiusHolding(0.5, 1, d, 0.5)).toBeCloseTo(median, 5);
    expect(radiusHolding(0.5, 1, d, 0.95)).toBeCloseTo(most, 5);
    expect(chanceWithin(0.5, 1, radiusHolding(0.5, 1, d, 0.8), d)).toBeCloseTo(0.8, 12);
  });

  test('what cannot be is refused, and a particle that does not move stays', () => {
    expect(() => rmsTravel(-1, 1, 1)).toThrow('D');
    expect(() => chanceWithin(1, NaN, 1, 1)).toThrow('time');
    expect(() => radiusHolding(1, 1, 1, 1)).toThrow('share');
    expect(chanceWithin(0, 5, 0.1, 2)).toBe(1);
    expect(timeToSpread(0, 1, 2)).toBe(Infinity);
  });

  test('an interval of D is carried over by its ends', () => {
    const D = { value: 0.5, lo: 0, hi: 2 };
    expect(carried(D, 'grows', (one) => rmsTravel(one, 1, 1))).toEqual({ value: 1, lo: 0, hi: 2 });
    expect(carried(D, 'falls', (one) => timeToSpread(one, 1, 1))).toEqual({ value: 1, lo: 0.25, hi: null });
    expect(carried({ value: 1, lo: null, hi: 3 }, 'falls', (one) => 1 / one)).toEqual({
      value: 1,
      lo: 1 / 3,
      hi: null,
    });
  });
});
