import type { BlockAttributes } from './block-settings';

/** What each attribute of a diffusion block is called on the page, in messages and in the settings form alike. */
export const BLOCK_WORDS: Readonly<Record<keyof BlockAttributes, string>> = {
  blockId: 'name of the block',
  readingIds: 'files',
  caption: 'caption',
  dims: 'axes',
  fitLagFirst: 'first lag of the line',
  fitLagLast: 'last lag of the line',
  drift: 'common drift',
  minTrackFrames: 'shortest track',
  exposureSeconds: 'exposure in seconds',
  exposureFraction: 'exposure as part of the interval',
  sigma: 'localisation error',
  medium: 'medium',
  viscosity: 'viscosity',
  temperature: 'temperature',
  particleDiameter: 'particle diameter',
  geometry: 'shape of the confinement',
  excludedTracks: 'tracks left out',
};

/** A block without an id of its own is projected under this name. */
const UNNAMED = 'unnamed';

/**
 * The name under which a block is projected. A copy that kept the id of its original (written by another program, or
 * pasted while two people edited) stays visible under a name of its own: "…#2" for the second with that id, and so on.
 * @param blockId - as read from the attributes; empty when it was not usable.   @param occurrence - from 1, in document order.
 */
export function projectedName(blockId: string, occurrence: number): string {
  const name = blockId || UNNAMED;
  return occurrence === 1 ? name : `${name}#${occurrence}`;
}

/** Whether a projected block is the one with this id, or a copy of it. */
export function isNamed(projected: string, blockId: string): boolean {
  const name = blockId || UNNAMED;
  return projected === name || projected.startsWith(`${name}#`);
}
