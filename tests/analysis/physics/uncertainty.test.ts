import { describe, expect, test } from 'vitest';
import { glycerolWater, WATER } from '../../../analysis/physics/media';
import { apparentDiameter } from '../../../analysis/physics/stokes-einstein';
import {
  sizeUncertainty,
  temperatureSensitivity,
  viscosityUncertainty,
} from '../../../analysis/physics/uncertainty';
import { seededRandom } from '../../../analysis/random';

const D = { value: 0.5, lo: 0.5 / 1.1, hi: 0.5 * 1.1 };

describe('uncertainty of a size (JCGM 100:2008, GUM)', () => {
  test.each([
    // 1/T − ∂lnη/∂T of Pátek et al. 2009, computed by another program; % per kelvin.
    [20, 2.79],
    [25, 2.61],
    [37, 2.27],
  ])('it goes with the temperature of water at %i °C', (celsius, expected) => {
    expect(100 * temperatureSensitivity(WATER, celsius)).toBeCloseTo(expected, 2);
  });

  test('sources add in square and are listed from the largest', () => {
    const found = sizeUncertainty(1, {
      D,
      temperature: 25,
      temperatureError: 1,
      medium: WATER,
      scaleError: 0.002,
    });
    expect(found.contributions.map((one) => one.source)).toEqual(['D', 'temperature', 'viscosity', 'scale']);
    const u = Math.log(1.1) / 1.959964;
    expect(found.relative).toBeCloseTo(Math.sqrt(u ** 2 + 0.02613 ** 2 + 0.01 ** 2 + 0.004 ** 2), 5);
    expect(found.expanded.hi).toBeCloseTo(Math.exp(2 * found.relative!), 10);
    expect(found.expanded.lo).toBeCloseTo(Math.exp(-2 * found.relative!), 10);
  });

  test('agrees with a propagation of distributions (JCGM 101:2008): 95.45 % of draws lie inside', () => {
    const random = seededRandom(77);
    const medium = glycerolWater(0.5);
    const causes = { D, temperature: 25, temperatureError: 0.5, medium };
    const d = apparentDiameter(25, medium.viscosity(25), 0.5);
    const { expanded } = sizeUncertainty(d, causes);
    let inside = 0;
    const draws = 20_000;
    for (let i = 0; i < draws; i++) {
      const oneD = 0.5 * Math.exp((random.gaussian() * Math.log(1.1)) / 1.959964);
      const t = 25 + 0.5 * random.gaussian();
      const eta = medium.viscosity(t) * Math.exp(medium.uncertainty * random.gaussian());
      const one = apparentDiameter(t, eta, oneD);
      if (one > expanded.lo! && one < expanded.hi!) inside++;
    }
    // Four standard deviations of the share, and a little for the bend of the formula.
    expect(Math.abs(inside / draws - 0.9545)).toBeLessThan(0.008);
  });

  test('a stated viscosity does not follow the temperature', () => {
    const found = sizeUncertainty(1, {
      D,
      temperature: 25,
      temperatureError: 1,
      medium: { stated: 0.03 },
    });
    const temperature = found.contributions.find((one) => one.source === 'temperature')!;
    expect(temperature.relative).toBeCloseTo(1 / 298.15, 12);
  });

  test('an open side of D stays open on the other side of the size, and skew is kept', () => {
    const open = sizeUncertainty(1, {
      D: { value: 0.5, lo: 0, hi: 0.8 },
      temperature: 25,
      temperatureError: 0,
      medium: { stated: 0 },
    });
    expect(open.relative).toBeNull();
    expect(open.expanded.hi).toBeNull();
    expect(open.expanded.lo).toBeCloseTo((0.5 / 0.8) ** (2 / 1.959964), 6);
  });

  test('a viscosity has the particle diameter among its sources; nonsense is refused', () => {
    const causes = { D, temperature: 25, temperatureError: 0 };
    const found = viscosityUncertainty(0.9, causes, 0.05);
    expect(found.contributions[0]).toEqual({ source: 'diameter', relative: 0.05 });
    expect(() => viscosityUncertainty(0.9, causes, -1)).toThrow('diameter');
  });
});
