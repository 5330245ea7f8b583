import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { intervalScale, placeOn } from '@/components/measurements/interval-scale';

const positive = fc.double({ min: 1e-300, max: 1e300, noNaN: true });

describe('the log axis of intervals', () => {
  test('holds every value above zero, in order, with equal ratios at equal distances', () => {
    fc.assert(
      fc.property(fc.array(positive, { minLength: 1, maxLength: 20 }), (values) => {
        const scale = intervalScale(values);
        if (!scale) throw new Error('there are values, so there is an axis');
        const places = [...values].sort((a, b) => a - b).map((value) => placeOn(scale, value));
        for (const [i, place] of places.entries()) {
          expect(place).toBeGreaterThan(0);
          expect(place).toBeLessThan(1);
          expect(place).toBeGreaterThanOrEqual(places[i - 1] ?? 0);
        }
        const middle = Math.exp((Math.log(scale.lo) + Math.log(scale.hi)) / 2);
        expect(placeOn(scale, middle)).toBeCloseTo(0.5, 9);
        expect(placeOn(scale, scale.lo)).toBe(0);
        expect(placeOn(scale, scale.hi)).toBeCloseTo(1, 9);
      }),
      { seed: 1, numRuns: 500 },
    );
  });

  test('has one to five ticks, all on it, each a round number', () => {
    fc.assert(
      fc.property(positive, fc.double({ min: 1, max: 1e12, noNaN: true }), (low, ratio) => {
        const scale = intervalScale([low, Math.min(low * ratio, 1e300)]);
        const ticks = scale?.ticks ?? [];
        expect(ticks.length).toBeGreaterThanOrEqual(1);
        expect(ticks.length).toBeLessThanOrEqual(5);
        for (const { value } of ticks) {
          expect(value).toBeGreaterThanOrEqual(scale?.lo ?? Infinity);
          expect(value).toBeLessThanOrEqual(scale?.hi ?? -Infinity);
          expect(value.toExponential()).toMatch(/^[1235]e/);
        }
      }),
      { seed: 2, numRuns: 500 },
    );
  });

  test.each([
    [
      [0.3, 0.6],
      ['0.2', '0.5'],
    ],
    [
      [0.01, 10],
      ['0.01', '0.1', '1', '10'],
    ],
    [
      [2e-7, 3e-5],
      ['10⁻⁶', '10⁻⁵'],
    ],
    [
      [1e-3, 1e6],
      ['0.001', '1', '1000', '10⁶'],
    ],
  ])('over %j it is marked %j', (values, labels) => {
    expect(intervalScale(values)?.ticks.map(({ label }) => label)).toEqual(labels);
  });

  test('does not blow up one value to the whole width', () => {
    const scale = intervalScale([0.43]);
    expect((scale?.hi ?? 0) / (scale?.lo ?? 1)).toBeCloseTo(5, 9);
    expect(placeOn(scale ?? { lo: 1, hi: 2, ticks: [] }, 0.43)).toBeCloseTo(0.5, 9);
  });

  test('has no place for zero, and no axis without a value', () => {
    expect(intervalScale([null, 0, -1])).toBeNull();
    const scale = intervalScale([0, 0.1, 1]);
    expect(scale && placeOn(scale, 0)).toBe(0);
    expect(scale?.lo).toBeGreaterThan(0.05);
  });
});
