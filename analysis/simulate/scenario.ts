import { seededRandom, type Random } from '../random';
import { anomalousMsd, confinedMsd, displacementCovariance, freeMsd } from '../spectrum/models';
import type { Trajectories } from '../types';
import { stationarySeries } from './gaussian-series';
import { simulateWalk } from './walk';

/**
 * Kinds of motion that accuracy is measured on; D = 1 and Δt = 1, so lengths are in √(DΔt). `speed`: of all tracks
 * together ("flow") or of each in a direction of its own ("own"). `q` = κΔt of a harmonic trap.
 */
export type Motion =
  | { readonly kind: 'free' }
  | { readonly kind: 'flow' | 'own'; readonly speed: number }
  | { readonly kind: 'trap'; readonly q: number }
  | { readonly kind: 'box'; readonly width: number }
  | { readonly kind: 'power'; readonly alpha: number };

export interface Scenario {
  readonly motion: Motion;
  readonly tracks: number;
  /** Positions of a track. */
  readonly frames: number;
  readonly dims: 1 | 2 | 3;
  /** σ²/(DΔt). */
  readonly x: number;
  /** Exposure as a fraction of the interval. */
  readonly exposure: number;
  /** Chance that a frame is missing. */
  readonly missing?: number;
  /** Coefficient of variation of D over tracks (log-normal); 0: all the same. */
  readonly spreadOfD?: number;
  /** D of the stage's random walk, shared by all tracks. */
  readonly stageD?: number;
}

/** Makes data sets of one scenario; what is the same for all of them is prepared once. */
export function scenarioMaker(scenario: Scenario): (seed: number) => Trajectories {
  const { motion, tracks, frames, dims, exposure } = scenario;
  return (seed) => {
    const random = seededRandom(seed);
    const draw = motion.kind === 'box' ? null : stationarySeries(covarianceOf(scenario), random);
    const stage = Array.from({ length: dims }, () => stagePath(scenario, random));
    const track: number[] = [];
    const frame: number[] = [];
    const axes: number[][] = Array.from({ length: dims }, () => []);
    const flow = motion.kind === 'flow' ? direction(motion.speed, dims, random) : null;
    for (let m = 0; m < tracks; m++) {
      const scale = Math.sqrt(factorOfD(scenario.spreadOfD ?? 0, random));
      const own = motion.kind === 'own' ? direction(motion.speed, dims, random) : flow;
      const columns = Array.from({ length: dims }, (_, axis) => {
        const path = draw ? accumulate(draw(), frames) : boxPath(scenario, random);
        return path.map((value, f) => {
          const noise = Math.sqrt(scenario.x) * random.gaussian();
          return scale * value + (own ? own[axis]! * f : 0) + stage[axis]![f]! + noise;
        });
      });
      for (let f = 0; f < frames; f++) {
        if (scenario.missing && f > 0 && f < frames - 1 && random.uniform() < scenario.missing) continue;
        track.push(m);
        frame.push(f);
        for (let axis = 0; axis < dims; axis++) axes[axis]!.push(columns[axis]![f]!);
      }
    }
    return {
      hash: `scenario-${seed}`,
      trackIds: Array.from({ length: tracks }, (_, m) => String(m + 1)),
      track: Int32Array.from(track),
      frame: Int32Array.from(frame),
      time: null,
      axes: axes.map((axis) => Float64Array.from(axis)),
      frameInterval: 1,
      exposure: { fraction: exposure },
    };
  };
}

function covarianceOf({ motion, frames, exposure }: Scenario): Float64Array {
  const msd =
    motion.kind === 'trap'
      ? confinedMsd(motion.q, exposure)
      : motion.kind === 'power'
        ? anomalousMsd(motion.alpha, exposure)
        : freeMsd(exposure);
  // Twice as long as needed: the embedding of a slowly falling covariance is then positive.
  return displacementCovariance(msd, 2 * frames);
}

function accumulate(steps: Float64Array, frames: number): Float64Array {
  const path = new Float64Array(frames);
  for (let f = 1; f < frames; f++) path[f] = path[f - 1]! + steps[f - 1]!;
  return path;
}

function boxPath({ motion, frames, exposure }: Scenario, random: Random): Float64Array {
  if (motion.kind !== 'box') throw new TypeError('a path in a box needs a box');
  return simulateWalk(
    { D: 1, interval: 1, exposure, sigma: 0, velocity: [0], box: motion.width },
    frames,
    random,
  )[0]!;
}

function stagePath({ stageD, frames }: Scenario, random: Random): Float64Array {
  const path = new Float64Array(frames);
  if (!stageD) return path;
  for (let f = 1; f < frames; f++) path[f] = path[f - 1]! + Math.sqrt(2 * stageD) * random.gaussian();
  return path;
}

/** A velocity of this length in any direction. */
function direction(speed: number, dims: number, random: Random): number[] {
  const vector = Array.from({ length: dims }, () => random.gaussian());
  const length = Math.hypot(...vector);
  return vector.map((value) => (speed * value) / length);
}

/** Log-normal with mean 1. */
function factorOfD(cv: number, random: Random): number {
  if (cv === 0) return 1;
  const s2 = Math.log(1 + cv * cv);
  return Math.exp(Math.sqrt(s2) * random.gaussian() - s2 / 2);
}
