import { describe, expect, test } from 'vitest';
import { alongWall, tooCloseToTrust, towardsWall } from '../../../analysis/physics/walls';

describe('a sphere near a flat wall', () => {
  test.each([
    // Faxén's polynomial (Happel & Brenner, Low Reynolds Number Hydrodynamics), evaluated by another program.
    [1.5, 0.619084],
    [2, 0.721436],
    [3, 0.814702],
    [5, 0.888199],
    [10, 0.943857],
  ])('along it at h/a = %d', (h, expected) => {
    expect(alongWall(h)).toBeCloseTo(expected, 6);
  });

  test.each([
    // Brenner 1961, Chem. Eng. Sci. 16:242, its series summed by another program.
    [1.1, 0.087266],
    [1.5, 0.311974],
    [2, 0.47047],
    [3, 0.637265],
    [5, 0.778158],
    [10, 0.887947],
  ])('towards it at h/a = %d', (h, expected) => {
    expect(towardsWall(h)).toBeCloseTo(expected, 6);
  });

  test('the series keeps to the rational form of Bevan & Prieve 2000, J. Chem. Phys. 113:1228, within 0.7 %', () => {
    for (const h of [1.1, 1.2, 1.5, 2, 3, 5, 10, 30]) {
      const z = h - 1;
      const rational = (6 * z * z + 2 * z) / (6 * z * z + 9 * z + 2);
      expect(Math.abs(towardsWall(h) / rational - 1)).toBeLessThan(0.007);
    }
  });

  test('far away the first corrections are 9/16 and 9/8 of a/h (Lorentz 1907), and none is left at last', () => {
    expect((1 - alongWall(1000)) * 1000).toBeCloseTo(9 / 16, 5);
    expect((1 - towardsWall(1000)) * 1000).toBeCloseTo(9 / 8, 2);
    expect(towardsWall(1e6)).toBeCloseTo(1, 5);
  });

  test('close to the wall a figure is warned of, then refused', () => {
    expect(tooCloseToTrust(1.4)).toBe(true);
    expect(tooCloseToTrust(1.5)).toBe(false);
    for (const h of [1.09, 0, NaN, Infinity]) {
      expect(() => alongWall(h)).toThrow('1.1 radii');
      expect(() => towardsWall(h)).toThrow('1.1 radii');
    }
  });
});
