/**
 * Viscosity of liquid water at 0.1 MPa: η/µPa·s = Σ a_i (T/300 K)^(b_i), uncertainty 1 %.
 * Source: Pátek, Hrubý, Klomfar, Součková & Harvey 2009, J. Phys. Chem. Ref. Data 38:21 (IAPWS 2008 correlation).
 */
const A = [280.68, 511.45, 61.131, 0.45903] as const;
const B = [-1.9, -7.7, -19.6, -40] as const;

/** Range of the correlation, degrees Celsius. */
export const WATER_LOWEST = -20;
export const WATER_HIGHEST = 110;

/**
 * @param temperature - degrees Celsius.   @returns millipascal seconds.
 * @throws RangeError outside −20 … 110 °C, where the correlation does not hold.
 */
export function waterViscosity(temperature: number): number {
  if (!(temperature >= WATER_LOWEST && temperature <= WATER_HIGHEST)) {
    throw new RangeError(
      `water viscosity is known from ${WATER_LOWEST} to ${WATER_HIGHEST} °C, not at ${temperature} °C`,
    );
  }
  const t = (temperature + 273.15) / 300;
  return A.reduce((sum, a, i) => sum + a * t ** B[i]!, 0) / 1000;
}
