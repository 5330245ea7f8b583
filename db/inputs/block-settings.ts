import { z } from 'zod';
import type { AnalysisSettings } from '../../analysis/types';

/**
 * The attributes of a diffusion block in the document, one a setting, so that two people who change different settings
 * merge. They hold ids and settings only, never a measured value. Anybody's program can write anything into a document,
 * so each attribute is checked on its own here; one that is not right falls back to its default and is named.
 */

const positive = z.number().positive().finite();
const lag = z.number().int().min(1).max(1_000_000);

export const MAX_READINGS_PER_BLOCK = 50;

/** Text that the database can keep: no NUL, no half of a surrogate pair. */
const words = (most: number) =>
  z
    .string()
    .max(most)
    .refine((text) => !text.includes('\0') && text.isWellFormed());

/** Shape of each attribute. The editor's node, the projector and the settings form all take it from here. */
export const blockAttributes = {
  blockId: z.uuid(),
  readingIds: z.array(z.uuid()).max(MAX_READINGS_PER_BLOCK),
  caption: z.string().max(500),
  dims: z.union([z.literal('auto'), z.literal(1), z.literal(2), z.literal(3)]),
  fitLagFirst: lag.nullable(),
  fitLagLast: lag.nullable(),
  drift: z.enum(['auto', 'remove', 'keep']),
  minTrackFrames: z.number().int().min(2).max(1_000_000),
  /** Seconds; wins over the fraction when both are set. */
  exposureSeconds: positive.nullable(),
  exposureFraction: z.number().min(0).max(1).nullable(),
  /** Localisation error per axis known from elsewhere, micrometres. */
  sigma: z.number().min(0).max(1e6).nullable(),
  medium: z.enum(['water']).nullable(),
  /** Millipascal seconds; used when no medium is named. */
  viscosity: positive.nullable(),
  /** Degrees Celsius. */
  temperature: z.number().min(-50).max(150).nullable(),
  /** Micrometres. */
  particleDiameter: positive.nullable(),
  geometry: z.enum(['box', 'circle', 'sphere']),
  excludedTracks: z
    .array(z.object({ reading: z.number().int().min(0), track: words(1000), reason: words(300) }))
    .max(10_000),
} as const;

export type BlockAttributes = { [K in keyof typeof blockAttributes]: z.infer<(typeof blockAttributes)[K]> };

export const BLOCK_DEFAULTS: BlockAttributes = {
  blockId: '',
  readingIds: [],
  caption: '',
  dims: 'auto',
  fitLagFirst: null,
  fitLagLast: null,
  drift: 'auto',
  minTrackFrames: 2,
  exposureSeconds: null,
  exposureFraction: null,
  sigma: null,
  medium: null,
  viscosity: null,
  temperature: null,
  particleDiameter: null,
  geometry: 'box',
  excludedTracks: [],
};

export interface ReadBlock {
  readonly attributes: BlockAttributes;
  readonly settings: AnalysisSettings;
  /** Names of attributes whose content was not usable and was replaced by the default. */
  readonly faulty: readonly (keyof BlockAttributes)[];
}

/** Reads a block's attributes as they stand in a document (unknown content) into settings for the engine. */
export function readBlock(raw: Readonly<Record<string, unknown>>): ReadBlock {
  const faulty: (keyof BlockAttributes)[] = [];
  const attributes: Record<string, unknown> = {};
  for (const name of Object.keys(blockAttributes) as (keyof BlockAttributes)[]) {
    const value = raw[name] === undefined ? BLOCK_DEFAULTS[name] : raw[name];
    const parsed = blockAttributes[name].safeParse(value);
    if (!parsed.success) faulty.push(name);
    attributes[name] = parsed.success ? parsed.data : BLOCK_DEFAULTS[name];
  }
  const read = attributes as BlockAttributes;
  return { attributes: read, settings: settingsOf(read), faulty };
}

/** The engine's settings that a block's attributes state. */
export function settingsOf(block: BlockAttributes): AnalysisSettings {
  const { exposureSeconds: seconds, exposureFraction: fraction } = block;
  return {
    dims: block.dims,
    fitLagFirst: block.fitLagFirst,
    fitLagLast: block.fitLagLast,
    drift: block.drift,
    minTrackFrames: block.minTrackFrames,
    exposure: seconds !== null ? { seconds } : fraction !== null ? { fraction } : null,
    sigma: block.sigma,
    medium:
      block.medium !== null
        ? { name: block.medium }
        : block.viscosity !== null
          ? { viscosity: block.viscosity }
          : null,
    temperature: block.temperature,
    particleDiameter: block.particleDiameter,
    geometry: block.geometry,
    excludedTracks: block.excludedTracks,
  };
}
