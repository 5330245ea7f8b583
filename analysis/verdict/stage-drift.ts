import { driftFor } from '../estimators/drift';
import { fitTwo, noiseShape } from '../estimators/likelihood';
import type { CommonMotion } from '../input/common-motion';
import { spectrumOf } from '../spectrum/spectrum';
import { freeShape } from './free-fit';

/**
 * How far the way that the stage happened to go may pass for a drift: variance per axis of its mean displacement per frame,
 * µm². The stage's path is itself fitted as a random walk with jitter: a walk makes the mean uncertain, jitter hardly does.
 */
export function stageDriftVariance(common: CommonMotion | null, dims: number): number {
  if (!common?.present) return 0;
  const runs = common.path.filter((run) => run.displacements[0]!.length >= 2);
  const frames = common.path.reduce((sum, run) => sum + run.displacements[0]!.length, 0);
  const plain = Math.max(0, common.variance) / Math.max(1, frames);
  if (runs.length === 0) return plain;
  const spectrum = spectrumOf(runs, dims);
  const a = freeShape(spectrum, 0);
  const b = noiseShape(spectrum);
  const fit = fitTwo(spectrum, a, b);
  // No walk that can be seen: jitter alone decides, and it is never worse than taking all of it for a walk.
  const { se } = driftFor(spectrum, a, b, fit.delta > 0 ? fit : { ...fit, delta: 0 });
  return Number.isFinite(se) ? Math.min(plain, se * se) : plain;
}
