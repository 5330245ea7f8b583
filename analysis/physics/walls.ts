/** Diffusion of a sphere near one flat wall, as a fraction of that far away. h: height of its centre, a: its radius. */

/** Below this h/a the parallel formula is off by more than 1 %, and small errors of height matter much. */
export const WALL_WARN_BELOW = 1.5;
/** Below this h/a no figure is given. */
export const WALL_REFUSE_BELOW = 1.1;

/**
 * Along the wall (Faxén): 1 − 9r/16 + r³/8 − 45r⁴/256 − r⁵/16, r = a/h. About 1 % low at h/a = 1.54, 4 % at 1.13
 * against Goldman, Cox & Brenner 1967, Chem. Eng. Sci. 22:637.
 * @throws RangeError below h/a = 1.1.
 */
export function alongWall(heightOverRadius: number): number {
  const r = 1 / allowed(heightOverRadius);
  return 1 - (9 * r) / 16 + r ** 3 / 8 - (45 * r ** 4) / 256 - r ** 5 / 16;
}

/**
 * Towards the wall: the exact series of Brenner 1961, Chem. Eng. Sci. 16:242.
 * @throws RangeError below h/a = 1.1.
 */
export function towardsWall(heightOverRadius: number): number {
  const alpha = Math.acosh(allowed(heightOverRadius));
  const s = Math.sinh(alpha);
  const s2 = Math.sinh(2 * alpha);
  let sum = 0;
  for (let n = 1; n < 10_000; n++) {
    const m = 2 * n + 1;
    // The bracket of the paper times e^(−mα) above and below, with its −1 taken in: nothing overflows or cancels.
    const E = Math.exp(-m * alpha);
    const bracket = (E * (2 * (1 - E) + m * s2 + m * m * s * s)) / ((1 - E) ** 2 - m * m * s * s * E);
    const term = ((n * (n + 1)) / ((2 * n - 1) * (2 * n + 3))) * bracket;
    sum += term;
    if (term < 1e-17 * sum) break;
  }
  return 1 / ((4 / 3) * s * sum);
}

/** Whether a warning belongs to a figure at this height. */
export const tooCloseToTrust = (heightOverRadius: number): boolean => heightOverRadius < WALL_WARN_BELOW;

function allowed(heightOverRadius: number): number {
  if (!(heightOverRadius >= WALL_REFUSE_BELOW && Number.isFinite(heightOverRadius)))
    throw new RangeError(
      `the centre must be at least ${WALL_REFUSE_BELOW} radii from the wall, not ${heightOverRadius}`,
    );
  return heightOverRadius;
}
