import type { AnalysisSettings, Estimate, StokesEinstein } from '../types';
import { apparentDiameter, apparentViscosity, expectedDiffusion } from './stokes-einstein';
import { WATER_HIGHEST, WATER_LOWEST, waterViscosity } from './water';

/**
 * What D says together with the stated medium, temperature and particle. 1/D is skewed, so an interval is carried over
 * by its ends, never by ± a multiple of an error.
 * @returns null when too little is stated for anything.
 */
export function sizeOrViscosity(settings: AnalysisSettings, D: Estimate | null): StokesEinstein | null {
  const { temperature, medium, particleDiameter } = settings;
  if (temperature === null || temperature <= -273.15) return null;
  const viscosity = viscosityOf(medium, temperature);
  if (viscosity === null && particleDiameter === null) return null;
  const known = D !== null && D.value > 0 ? D : null;
  return {
    viscosity,
    diameter:
      viscosity !== null && known
        ? invert(known, (one) => apparentDiameter(temperature, viscosity, one))
        : null,
    apparentViscosity:
      particleDiameter !== null && known
        ? invert(known, (one) => apparentViscosity(temperature, particleDiameter, one))
        : null,
    expectedD:
      viscosity !== null && particleDiameter !== null
        ? expectedDiffusion(temperature, viscosity, particleDiameter)
        : null,
  };
}

function viscosityOf(medium: AnalysisSettings['medium'], temperature: number): number | null {
  if (medium === null) return null;
  if ('viscosity' in medium) return medium.viscosity;
  return temperature >= WATER_LOWEST && temperature <= WATER_HIGHEST ? waterViscosity(temperature) : null;
}

/** A quantity that falls when D rises: the ends of the interval change places. */
function invert(D: Estimate, f: (D: number) => number): Estimate {
  return {
    value: f(D.value),
    lo: D.hi !== null && D.hi > 0 ? f(D.hi) : null,
    hi: D.lo !== null && D.lo > 0 ? f(D.lo) : null,
  };
}
