import { describe, expect, test } from 'vitest';
import { glycerolWater, viscositySlope, WATER, waterDensity } from '../../../analysis/physics/media';
import { apart } from '../golden';

const FRACTIONS = [0, 0.1, 0.2, 0.4, 0.5, 0.6, 0.8, 1];

describe('glycerol and water', () => {
  test.each([
    // Cheng 2008, Ind. Eng. Chem. Res. 47:3285, its equations evaluated by another program.
    [20, [1.00486, 1.29724, 1.74139, 3.68482, 6.00225, 10.9115, 60.8591, 1413.83]],
    [25, [0.892739, 1.14556, 1.52451, 3.13722, 5.00369, 8.84785, 45.3504, 905.68]],
    [37, [0.693248, 0.877908, 1.14681, 2.22526, 3.39578, 5.66611, 24.2998, 350.012]],
  ])('at %i °C', (celsius, expected) => {
    FRACTIONS.forEach((c, i) =>
      expect(apart(glycerolWater(c).viscosity(celsius), expected[i]!)).toBeLessThan(6e-6),
    );
  });

  test.each([
    // Handbook values at 20 °C (table of the Dow Chemical Company, Optim glycerine).
    [0.2, 1.76],
    [0.5, 6.0],
    [0.8, 60.1],
    [1, 1410],
  ])('is within its stated uncertainty of a measured table, mass fraction %d', (c, expected) => {
    const medium = glycerolWater(c);
    expect(apart(medium.viscosity(20), expected)).toBeLessThan(medium.uncertainty);
  });

  test('is refused outside its range', () => {
    expect(() => glycerolWater(1.2)).toThrow('mass fraction');
    expect(() => glycerolWater(0.5).viscosity(-1)).toThrow('0 to 100');
    expect(() => glycerolWater(0.5).viscosity(NaN)).toThrow('0 to 100');
  });
});

describe('how viscosity changes with temperature', () => {
  test.each([
    // Derivative of the correlation of Pátek et al. 2009, computed by another program; % per kelvin.
    [20, -2.45],
    [25, -2.278],
    [37, -1.948],
  ])('water at %i °C', (celsius, expected) => {
    expect(100 * viscositySlope(WATER, celsius)).toBeCloseTo(expected, 3);
  });

  test('at the ends of the range the slope is taken from inside', () => {
    expect(viscositySlope(WATER, 110)).toBeCloseTo(viscositySlope(WATER, 109.99), 4);
    expect(viscositySlope(glycerolWater(1), 0)).toBeCloseTo(viscositySlope(glycerolWater(1), 0.01), 3);
    expect(() => viscositySlope(WATER, 200)).toThrow(RangeError);
  });
});

test.each([
  // Tanaka et al. 2001, Metrologia 38:301, its table; kg/m³.
  [20, 998.2067],
  [25, 997.047],
  [37, 993.329],
])('density of water at %i °C', (celsius, expected) => {
  expect(Math.abs(waterDensity(celsius) - expected)).toBeLessThan(6e-5);
  expect(() => waterDensity(41)).toThrow(RangeError);
});
