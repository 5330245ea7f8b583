import { seededRandom } from '../random';
import type { Trajectories } from '../types';
import { simulateWalk, type WalkPhysics } from './walk';

export interface DataSetPlan {
  readonly seed: number;
  readonly tracks: number;
  readonly frames: number;
  /** Physics of track m; the same for all when it ignores its argument. */
  readonly physics: (track: number) => WalkPhysics;
  /** Chance that a frame of a track is missing. */
  readonly missing?: number;
  /** Side of the field over which particles are scattered, µm. */
  readonly field?: number;
}

/** A whole simulated file: the demo and the tests are made of these. The same plan always gives the same positions. */
export function simulateDataSet(plan: DataSetPlan): Trajectories {
  const random = seededRandom(plan.seed);
  const dims = plan.physics(0).velocity.length;
  const track: number[] = [];
  const time: number[] = [];
  const axes: number[][] = Array.from({ length: dims }, () => []);
  for (let m = 0; m < plan.tracks; m++) {
    const physics = plan.physics(m);
    const path = simulateWalk(physics, plan.frames, random);
    const origin = Array.from({ length: dims }, () => (plan.field ?? 0) * random.uniform());
    for (let frame = 0; frame < plan.frames; frame++) {
      if (plan.missing && frame > 0 && random.uniform() < plan.missing) continue;
      track.push(m);
      time.push(Number((frame * physics.interval).toPrecision(12)));
      for (let axis = 0; axis < dims; axis++) axes[axis]!.push(path[axis]![frame]! + origin[axis]!);
    }
  }
  const first = plan.physics(0);
  return {
    hash: `simulated-${plan.seed}`,
    trackIds: Array.from({ length: plan.tracks }, (_, m) => String(m + 1)),
    track: Int32Array.from(track),
    frame: null,
    time: Float64Array.from(time),
    axes: axes.map((axis) => Float64Array.from(axis)),
    frameInterval: null,
    exposure: { fraction: first.exposure },
  };
}

/** The positions as a comma-separated file with units in the header. @param digits - decimals of a position. */
export function toCsv(data: Trajectories, digits = 4): string {
  const names = ['x', 'y', 'z'].slice(0, data.axes.length).map((name) => `${name} (µm)`);
  const lines = [`track,time (s),${names.join(',')}`];
  for (let row = 0; row < data.track.length; row++) {
    const positions = data.axes.map((axis) => axis[row]!.toFixed(digits));
    lines.push(`${data.trackIds[data.track[row]!]},${data.time![row]},${positions.join(',')}`);
  }
  return `${lines.join('\n')}\n`;
}
