import { describe, expect, test } from 'vitest';
import { waterDensity } from '../../../analysis/physics/media';
import {
  forceFromDrift,
  measuredOverExpected,
  sedimentationSpeed,
  standardDiffusion,
} from '../../../analysis/physics/motion';
import { expectedDiffusion } from '../../../analysis/physics/stokes-einstein';
import { waterViscosity } from '../../../analysis/physics/water';
import { apart } from '../golden';

test('force from drift: 1 µm/s, 0.5 µm²/s, 25 °C is 8.23281 fN (k_B of the SI, 2019), and equals 6πηav', () => {
  expect(apart(forceFromDrift(1, 0.5, 25), 8.23281)).toBeLessThan(1e-6);
  const eta = waterViscosity(25);
  // 6π · mPa·s · µm · µm/s = 1e-15 N.
  expect(
    apart(forceFromDrift(2, expectedDiffusion(25, eta, 1), 25), 6 * Math.PI * eta * 0.5 * 2),
  ).toBeLessThan(1e-12);
  expect(() => forceFromDrift(1, 0, 25)).toThrow('D');
});

test('a sinking sphere is one whose weight in water equals its drag (Stokes 1851)', () => {
  const excess = 1050 - waterDensity(25);
  const v = sedimentationSpeed(1, excess, waterViscosity(25));
  const weight = ((Math.PI / 6) * 1e-18 * excess * 9.80665) / 1e-15;
  expect(apart(6 * Math.PI * waterViscosity(25) * 0.5 * v, weight)).toBeLessThan(1e-12);
  expect(sedimentationSpeed(1, -10, 1)).toBeLessThan(0);
});

describe('D in water at 20 °C', () => {
  test('is what Stokes and Einstein say of the same sphere there', () => {
    const there = standardDiffusion(expectedDiffusion(37, 2.3, 0.4), 37, 2.3);
    expect(apart(there, expectedDiffusion(20, waterViscosity(20), 0.4))).toBeLessThan(1e-12);
    // 100 nm in water at 20 °C: 4.287676 µm²/s.
    expect(standardDiffusion(4.287676, 20, waterViscosity(20))).toBeCloseTo(4.287676, 10);
  });
});

test('measured over expected keeps the interval, open ends too', () => {
  expect(measuredOverExpected({ value: 1, lo: 0.5, hi: null }, 2)).toEqual({
    value: 0.5,
    lo: 0.25,
    hi: null,
  });
  expect(() => measuredOverExpected({ value: 1, lo: 0.5, hi: 2 }, 0)).toThrow('expected D');
});
