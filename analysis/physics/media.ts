import { requireFinite } from '../check';
import { WATER_HIGHEST, WATER_LOWEST, waterViscosity } from './water';

/** A liquid whose viscosity is known as a function of temperature. */
export interface Medium {
  /** @param temperature - degrees Celsius.   @returns millipascal seconds.   @throws RangeError outside the range. */
  readonly viscosity: (temperature: number) => number;
  /** Range of the formula, degrees Celsius. */
  readonly lowest: number;
  readonly highest: number;
  /** Relative uncertainty of the formula, taken as a standard uncertainty (cautious where the source says no more). */
  readonly uncertainty: number;
}

export const WATER: Medium = {
  viscosity: waterViscosity,
  lowest: WATER_LOWEST,
  highest: WATER_HIGHEST,
  uncertainty: 0.01,
};

/**
 * Glycerol in water, η = η_w^α η_g^(1−α). Source: Cheng 2008, Ind. Eng. Chem. Res. 47:3285; within 2 to 5 % of tables.
 * @param massFraction - of glycerol, 0 … 1 (not the volume fraction).   @throws RangeError outside 0 … 100 °C.
 */
export function glycerolWater(massFraction: number): Medium {
  if (!(massFraction >= 0 && massFraction <= 1))
    throw new RangeError(`mass fraction must lie between 0 and 1, not ${massFraction}`);
  return {
    viscosity: (temperature) => glycerolViscosity(massFraction, temperature),
    lowest: 0,
    highest: 100,
    uncertainty: 0.05,
  };
}

function glycerolViscosity(c: number, t: number): number {
  if (!(t >= 0 && t <= 100))
    throw new RangeError(`viscosity of glycerol and water is known from 0 to 100 °C, not at ${t} °C`);
  const water = 1.79 * Math.exp(((-1230 - t) * t) / (36100 + 360 * t));
  const glycerol = 12100 * Math.exp(((-1233 + t) * t) / (9900 + 70 * t));
  const a = 0.705 - 0.0017 * t;
  const b = (4.9 + 0.036 * t) * a ** 2.5;
  const alpha = 1 - c + (a * b * c * (1 - c)) / (a * c + b * (1 - c));
  return water ** alpha * glycerol ** (1 - alpha);
}

/** ∂lnη/∂T, 1/K: by differences of the formula, one-sided at the ends of its range. */
export function viscositySlope(medium: Medium, temperature: number): number {
  requireFinite('temperature', temperature);
  const from = Math.max(medium.lowest, temperature - 1e-3);
  const to = Math.min(medium.highest, temperature + 1e-3);
  return Math.log(medium.viscosity(to) / medium.viscosity(from)) / (to - from);
}

/**
 * Density of air-free water at 0.1 MPa, kg/m³.
 * Source: Tanaka, Girard, Davis, Peuto & Bignell 2001, Metrologia 38:301.
 * @param temperature - degrees Celsius, 0 … 40.   @throws RangeError outside.
 */
export function waterDensity(temperature: number): number {
  const t = temperature;
  if (!(t >= 0 && t <= 40))
    throw new RangeError(`water density is known from 0 to 40 °C, not at ${temperature} °C`);
  return 999.97495 * (1 - ((t - 3.983035) ** 2 * (t + 301.797)) / (522528.9 * (t + 69.34881)));
}
