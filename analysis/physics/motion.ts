import type { Estimate } from '../types';
import { requireFinite, requirePositive } from '../check';
import { BOLTZMANN } from './stokes-einstein';
import { waterViscosity } from './water';

/** Acceleration of free fall, m/s² (standard value, CGPM 1901). */
export const GRAVITY = 9.80665;

/**
 * Force that keeps a particle at a drift v, femtonewtons: F = v k_BT/D (the friction that D shows is the one v meets).
 * @param v - µm/s.   @param D - µm²/s.   @param temperature - degrees Celsius.
 */
export function forceFromDrift(v: number, D: number, temperature: number): number {
  requireFinite('drift', v);
  requirePositive('D', D);
  requirePositive('absolute temperature', temperature + 273.15);
  return (v / D) * BOLTZMANN * (temperature + 273.15) * 1e21;
}

/**
 * Speed at which a sphere sinks, µm/s (negative: rises): Δρ g d²/(18η). Source: Stokes 1851, Trans. Camb. Phil. Soc. 9:8.
 * @param diameter - µm.   @param excess - density of the particle less that of the liquid, kg/m³.
 * @param viscosity - mPa·s.
 */
export function sedimentationSpeed(diameter: number, excess: number, viscosity: number): number {
  requirePositive('diameter', diameter);
  requireFinite('density difference', excess);
  requirePositive('viscosity', viscosity);
  return ((excess * GRAVITY * diameter * diameter) / (18 * viscosity)) * 1e-3;
}

/**
 * D as it would be in water at 20 °C: D₂₀,w = D · (293.15/T) · η/η_water(20 °C).
 * @param viscosity - of the medium at the temperature of the measurement, mPa·s.   @param temperature - degrees Celsius.
 */
export function standardDiffusion(D: number, temperature: number, viscosity: number): number {
  requirePositive('absolute temperature', temperature + 273.15);
  requirePositive('viscosity', viscosity);
  return (D * 293.15 * viscosity) / ((temperature + 273.15) * waterViscosity(20));
}

/** Measured D over the expected one, with the interval; 1 outside it says that something is not as stated. */
export function measuredOverExpected(D: Estimate, expected: number): Estimate {
  requirePositive('expected D', expected);
  const over = (end: number | null) => (end === null ? null : end / expected);
  return { value: D.value / expected, lo: over(D.lo), hi: over(D.hi) };
}
