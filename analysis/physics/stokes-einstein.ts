import { requireFinite, requirePositive } from '../check';

/** Boltzmann constant, J/K, exact (SI 2019). */
export const BOLTZMANN = 1.380649e-23;

/** k_BT/(3π), in µm²/s · mPa·s · µm, at a temperature in degrees Celsius. */
function thermal(temperature: number): number {
  requireFinite('temperature', temperature);
  requirePositive('absolute temperature', temperature + 273.15);
  return ((BOLTZMANN * (temperature + 273.15)) / (3 * Math.PI)) * 1e21;
}

/**
 * Diffusion coefficient of a sphere, D = k_BT/(3πηd). Source: Einstein 1905, Ann. Phys. 322:549.
 * @param diameter - hydrodynamic, micrometres.   @param viscosity - millipascal seconds.   @returns µm²/s.
 */
export function expectedDiffusion(temperature: number, viscosity: number, diameter: number): number {
  requirePositive('viscosity', viscosity);
  requirePositive('diameter', diameter);
  return thermal(temperature) / (viscosity * diameter);
}

/** Apparent hydrodynamic diameter, micrometres, of a sphere that diffuses with D, µm²/s. */
export function apparentDiameter(temperature: number, viscosity: number, D: number): number {
  requirePositive('viscosity', viscosity);
  requirePositive('D', D);
  return thermal(temperature) / (viscosity * D);
}

/** Viscosity, millipascal seconds, in which a sphere of this diameter, micrometres, diffuses with D, µm²/s. */
export function apparentViscosity(temperature: number, diameter: number, D: number): number {
  requirePositive('diameter', diameter);
  requirePositive('D', D);
  return thermal(temperature) / (diameter * D);
}
