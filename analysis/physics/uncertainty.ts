import type { Estimate } from '../types';
import { requirePositive } from '../check';
import { viscositySlope, type Medium } from './media';

/** Coverage factor of stated uncertainties: about 95 % for a normal law. */
export const COVERAGE = 2;

/** Half width of a 95 % interval in standard errors. */
const NORMAL_95 = 1.959963984540054;

/** One source of uncertainty of a result. */
export interface Contribution {
  readonly source: 'D' | 'temperature' | 'viscosity' | 'diameter' | 'scale';
  /** Its relative standard uncertainty times its sensitivity: what it adds, in square, to that of the result. */
  readonly relative: number;
}

export interface Budget {
  /** Each source, largest first. D counts with the mean of its two sides. */
  readonly contributions: readonly Contribution[];
  /** Combined relative standard uncertainty; null where D is open on a side. */
  readonly relative: number | null;
  /** The result with its expanded uncertainty (coverage factor 2), sides apart because 1/D is skewed. */
  readonly expanded: Estimate;
}

export interface SizeCauses {
  /** D and its 95 % interval, µm²/s. */
  readonly D: Estimate;
  /** Degrees Celsius and its standard uncertainty, K. */
  readonly temperature: number;
  readonly temperatureError: number;
  /** A known medium, whose viscosity follows the temperature; or a relative standard uncertainty of a stated viscosity. */
  readonly medium: Medium | { readonly stated: number };
  /** Relative standard uncertainty of the length scale (µm a pixel); D goes with its square. */
  readonly scaleError?: number;
}

/**
 * Uncertainty of an apparent diameter d = k_BT/(3πηD):
 * u²(d)/d² = u²(D)/D² + (1 + |∂lnη/∂lnT|)² u²(T)/T² + u²(η)/η² (+ 4u²(scale)).
 * Source: JCGM 100:2008 (GUM), 5.1.2; the sides of D are kept apart on the logarithmic scale.
 * @param diameter - the value it belongs to, µm.
 */
export function sizeUncertainty(diameter: number, causes: SizeCauses): Budget {
  const known = 'viscosity' in causes.medium;
  const slope = 'viscosity' in causes.medium ? viscositySlope(causes.medium, causes.temperature) : 0;
  return budget(diameter, causes, [
    { source: 'temperature', relative: temperatureShare(causes, known ? slope : 0) },
    {
      source: 'viscosity',
      relative: 'viscosity' in causes.medium ? causes.medium.uncertainty : causes.medium.stated,
    },
  ]);
}

/**
 * Uncertainty of an apparent viscosity η = k_BT/(3πdD): u²(D)/D² + u²(T)/T² + u²(d)/d² (+ 4u²(scale)). JCGM 100:2008.
 * @param diameterError - relative standard uncertainty of the particles' stated diameter.
 */
export function viscosityUncertainty(
  viscosity: number,
  causes: Omit<SizeCauses, 'medium'>,
  diameterError: number,
): Budget {
  return budget(viscosity, causes, [
    { source: 'temperature', relative: temperatureShare(causes, 0) },
    { source: 'diameter', relative: diameterError },
  ]);
}

/** Relative change of a size (and of D) with temperature, 1/K: 1/T + |∂lnη/∂T|. */
export function temperatureSensitivity(medium: Medium, temperature: number): number {
  return 1 / (temperature + 273.15) + Math.abs(viscositySlope(medium, temperature));
}

function temperatureShare(
  { temperature, temperatureError }: Pick<SizeCauses, 'temperature' | 'temperatureError'>,
  slope: number,
): number {
  requirePositive('absolute temperature', temperature + 273.15);
  return (1 / (temperature + 273.15) + Math.abs(slope)) * temperatureError;
}

function budget(
  value: number,
  { D, scaleError = 0 }: Pick<SizeCauses, 'D' | 'scaleError'>,
  others: readonly Contribution[],
): Budget {
  requirePositive('D', D.value);
  const all = [...others, { source: 'scale' as const, relative: 2 * scaleError }];
  for (const { source, relative } of all)
    if (!(relative >= 0 && Number.isFinite(relative)))
      throw new RangeError(`uncertainty of ${source} must be zero or more, not ${relative}`);
  const rest = all.reduce((sum, { relative }) => sum + relative ** 2, 0);
  const below = D.lo !== null && D.lo > 0 ? Math.log(D.value / D.lo) / NORMAL_95 : null;
  const above = D.hi !== null ? Math.log(D.hi / D.value) / NORMAL_95 : null;
  const middle = below === null || above === null ? null : (below + above) / 2;
  const end = (own: number | null, sign: 1 | -1) =>
    own === null ? null : value * Math.exp(sign * COVERAGE * Math.hypot(own, Math.sqrt(rest)));
  const contributions = [...all, ...(middle === null ? [] : [{ source: 'D' as const, relative: middle }])];
  return {
    contributions: contributions.filter((one) => one.relative > 0).sort((a, b) => b.relative - a.relative),
    relative: middle === null ? null : Math.hypot(middle, Math.sqrt(rest)),
    // The result falls when D rises.
    expanded: { value, lo: end(above, -1), hi: end(below, 1) },
  };
}
