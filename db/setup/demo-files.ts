import { seededRandom } from '../../analysis/random';
import type { Trajectories } from '../../analysis/types';

/** Gives simulated tracks, whose frame interval and √(DΔt) are 1, real units, and scatters them over a field. */
export function inUnits(
  data: Trajectories,
  units: { readonly interval: number; readonly length: number; readonly field: number },
): Trajectories {
  const random = seededRandom(data.track.length);
  const origins = data.trackIds.map(() => data.axes.map(() => units.field * random.uniform()));
  return {
    ...data,
    frame: null,
    frameInterval: null,
    time: Float64Array.from(data.frame!, (frame) => Number((frame * units.interval).toPrecision(12))),
    axes: data.axes.map((axis, at) =>
      axis.map((value, row) => units.length * value + origins[data.track[row]!]![at]!),
    ),
  };
}
