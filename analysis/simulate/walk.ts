import type { Random } from '../random';

/** Physics of one simulated particle. Lengths µm, times s. */
export interface WalkPhysics {
  /** µm²/s. */
  readonly D: number;
  readonly interval: number;
  /** Exposure as a fraction of the interval, 0 to 1. */
  readonly exposure: number;
  /** Localisation error per axis, µm. */
  readonly sigma: number;
  /** µm/s, one an axis; its length is the number of axes. */
  readonly velocity: readonly number[];
  /** Reflecting walls 0 … width on every axis, µm; null: none. */
  readonly box: number | null;
}

/** Steps within one exposure: enough that R = (e/6)(1 − 1/m²) is right within 0.3 %. */
const EXPOSURE_STEPS = 20;

/**
 * Positions of one particle as a camera sees it: free diffusion (or between reflecting walls) with drift, averaged over
 * the exposure, plus localisation error.
 * @param frames - number of positions, ≥ 1.   @returns one array an axis, µm.
 */
export function simulateWalk(physics: WalkPhysics, frames: number, random: Random): Float64Array[] {
  return physics.velocity.map((velocity) => {
    const path = new Float64Array(frames);
    let at = physics.box === null ? 0 : random.uniform() * physics.box;
    for (let frame = 0; frame < frames; frame++) {
      const exposed = physics.exposure * physics.interval;
      let seen = at;
      if (exposed > 0) {
        // The mean over the exposure, by the trapezium rule over its steps.
        let sum = at / 2;
        for (let i = 1; i <= EXPOSURE_STEPS; i++) {
          at = step(physics, at, velocity, exposed / EXPOSURE_STEPS, random);
          sum += i === EXPOSURE_STEPS ? at / 2 : at;
        }
        seen = sum / EXPOSURE_STEPS;
      }
      path[frame] = seen + physics.sigma * random.gaussian();
      at = step(physics, at, velocity, physics.interval - exposed, random);
    }
    return path;
  });
}

function step(physics: WalkPhysics, at: number, velocity: number, seconds: number, random: Random): number {
  if (seconds <= 0) return at;
  const next = at + velocity * seconds + Math.sqrt(2 * physics.D * seconds) * random.gaussian();
  return physics.box === null ? next : reflect(next, physics.box);
}

/** Folds a free position into [0, width]: exact for a reflecting wall at the times of the steps. */
function reflect(x: number, width: number): number {
  const folded = ((x % (2 * width)) + 2 * width) % (2 * width);
  return folded > width ? 2 * width - folded : folded;
}
