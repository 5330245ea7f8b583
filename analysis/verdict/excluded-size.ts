import { CHI2_95_ONE } from '../estimators/profile-interval';
import { findRoot } from '../fit/minimise';
import type { AlternativeFit } from './alternatives';

/**
 * Width of the widest box that the data exclude, in √(µm²): a fit with that confinement is worse than the best one by more
 * than 3.84 in −2 ln L. Narrower boxes are excluded too.
 * @returns null when even the narrowest box that was tried is not excluded.
 */
export function excludedWidth({ model }: AlternativeFit): number | null {
  const least = model.fitAt(model.best).minus2LogL;
  const beyond = (logQ: number) => (model.fitAt(logQ).minus2LogL - least) / model.dispersion - CHI2_95_ONE;
  if (!(beyond(model.highest) > 0)) return null;
  const logQ = findRoot(beyond, model.best, model.highest, 1e-6);
  const { delta } = model.fitAt(logQ);
  return delta > 0 ? Math.sqrt((12 * delta) / Math.exp(logQ)) : null;
}
