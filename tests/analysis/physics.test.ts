import { describe, expect, test } from 'vitest';
import { sizeOrViscosity } from '../../analysis/physics/size-or-viscosity';
import {
  apparentDiameter,
  apparentViscosity,
  expectedDiffusion,
} from '../../analysis/physics/stokes-einstein';
import { waterViscosity } from '../../analysis/physics/water';
import { DEFAULT_SETTINGS } from '../../analysis/analyse';
import { apart } from './golden';

describe('viscosity of water at 0.1 MPa', () => {
  test.each([
    // Pátek et al. 2009, J. Phys. Chem. Ref. Data 38:21, evaluated from its equation; °C, µPa·s.
    [0, 1791.7824],
    [10, 1305.9017],
    [20, 1001.5673],
    [22, 954.3674],
    [25, 889.9968],
    [37, 691.3034],
    [50, 546.5265],
    [100, 281.5811],
  ])('at %i °C', (celsius, expected) => {
    // Half of the last printed digit.
    expect(Math.abs(1000 * waterViscosity(celsius) - expected)).toBeLessThan(6e-5);
  });

  test.each([
    // Independent route: the full formulation IAPWS R12-08 at the density of water at 0.1 MPa; the short form keeps to it.
    [20, 1001.596],
    [25, 890.023],
    [37, 691.303],
  ])('agrees with IAPWS R12-08 at %i °C within 0.01 %%', (celsius, expected) => {
    expect(apart(1000 * waterViscosity(celsius), expected)).toBeLessThan(1e-4);
  });

  test.each([-20.1, 110.1, NaN, Infinity])('is refused at %d °C', (celsius) => {
    expect(() => waterViscosity(celsius)).toThrow(RangeError);
  });
});

describe('Stokes–Einstein (Einstein 1905, Ann. Phys. 322:549; k_B of the SI, 2019)', () => {
  test.each([
    [25, 1, 0.490748],
    [20, 0.1, 4.287676],
    [37, 0.5, 1.314454],
  ])('D in water at %d °C of a sphere of %d µm', (celsius, diameter, expected) => {
    expect(apart(expectedDiffusion(celsius, waterViscosity(celsius), diameter), expected)).toBeLessThan(2e-6);
  });

  test('size from D, and viscosity from D', () => {
    expect(apart(apparentDiameter(25, waterViscosity(25), 0.5), 0.981496)).toBeLessThan(1e-6);
    expect(apart(apparentViscosity(25, 1, 0.5), 0.873528)).toBeLessThan(1e-6);
  });

  test('what cannot be is refused with its name', () => {
    expect(() => expectedDiffusion(25, 0, 1)).toThrow('viscosity');
    expect(() => expectedDiffusion(25, 1, -1)).toThrow('diameter');
    expect(() => apparentDiameter(-300, 1, 1)).toThrow('temperature');
    expect(() => apparentViscosity(25, 1, NaN)).toThrow('D');
  });

  test('the ends of an interval change places, and an open end stays open', () => {
    const settings = { ...DEFAULT_SETTINGS, medium: { name: 'water' as const }, temperature: 25 };
    const found = sizeOrViscosity(settings, { value: 0.5, lo: 0.4, hi: null })!;
    expect(found.diameter!.value).toBeCloseTo(0.981496, 5);
    expect(found.diameter!.lo).toBeNull();
    expect(found.diameter!.hi).toBeCloseTo((0.981496 * 0.5) / 0.4, 5);
    expect(found.apparentViscosity).toBeNull();
    expect(sizeOrViscosity(DEFAULT_SETTINGS, { value: 0.5, lo: 0.4, hi: 0.6 })).toBeNull();
    expect(sizeOrViscosity({ ...settings, particleDiameter: 1 }, null)).toMatchObject({
      diameter: null,
      apparentViscosity: null,
      expectedD: expect.closeTo(0.490748, 5) as number,
    });
  });
});
