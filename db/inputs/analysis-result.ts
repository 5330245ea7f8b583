import { z } from 'zod';
import type { AnalysisResult, AnalysisSettings } from '../../analysis/types';
import type { ReadingSummary } from '../../analysis/intake/types';

/**
 * The shape of a computed result on its way from the server's tables to a page. Numbers are finite: JSON has no NaN, and
 * zod refuses it. A page can rely on every field; a result of another engine that lacks one is refused as a whole.
 */
const numbers = z.array(z.number());
const count = z.number().int().min(0);
const estimate = z.object({ value: z.number(), lo: z.number().nullable(), hi: z.number().nullable() });
const exposure = z.union([z.object({ seconds: z.number() }), z.object({ fraction: z.number() })]);

export const analysisSettings: z.ZodType<AnalysisSettings> = z.object({
  dims: z.union([z.literal('auto'), z.literal(1), z.literal(2), z.literal(3)]),
  fitLagFirst: z.number().nullable(),
  fitLagLast: z.number().nullable(),
  drift: z.enum(['auto', 'remove', 'keep']),
  minTrackFrames: z.number(),
  exposure: exposure.nullable(),
  sigma: z.number().nullable(),
  medium: z.union([z.object({ name: z.literal('water') }), z.object({ viscosity: z.number() })]).nullable(),
  temperature: z.number().nullable(),
  particleDiameter: z.number().nullable(),
  geometry: z.enum(['box', 'circle', 'sphere']),
  excludedTracks: z.array(z.object({ reading: count, track: z.string(), reason: z.string() })),
});

const msd = z
  .object({
    lag: z.array(count),
    lagSeconds: numbers,
    total: numbers,
    perAxis: z.array(numbers),
    pairs: z.array(count),
    se: numbers,
    model: numbers,
    modelLo: numbers,
    modelHi: numbers,
  })
  .refine(
    ({ lag, perAxis, ...columns }) =>
      [...perAxis, ...Object.values(columns)].every((column) => column.length === lag.length),
    'its columns must be equally long',
  );

const drift = z.object({
  velocity: numbers,
  se: numbers,
  speed: z.number(),
  statistic: z.number(),
  threshold: z.number(),
  significant: z.boolean(),
  removed: z.boolean(),
});

const confinement = z.object({
  boundary: z.enum(['walls', 'well', 'unclear']),
  kurtosis: z.number().nullable(),
  width: estimate,
  circleRadius: estimate,
  sphereRadius: estimate,
  relaxationTime: estimate,
});

export const analysisResult: z.ZodType<AnalysisResult> = z.object({
  engine: z.string(),
  readingHashes: z.array(z.string()),
  settings: analysisSettings,
  D: estimate.nullable(),
  sigmaSquared: z.object({ value: z.number(), se: z.number().nullable() }).nullable(),
  sigma: z.number().nullable(),
  verdict: z.enum(['free', 'directed', 'confined', 'anomalous', 'undecided']),
  sentence: z.string(),
  drift: drift.nullable(),
  alpha: estimate.nullable(),
  K: estimate.nullable(),
  L: estimate.nullable(),
  confinement: confinement.nullable(),
  excludedWidth: z.number().nullable(),
  individualSpeed: estimate.nullable(),
  models: z.array(
    z.object({
      name: z.enum(['drift', 'anomalous', 'confined', 'individual']),
      statistic: z.number(),
      D: z.number().nullable(),
      parameter: z.number(),
    }),
  ),
  dispersion: z.number(),
  sharedMotion: z.object({ D: z.number(), z: z.number(), removed: z.boolean() }).nullable(),
  mislinks: count,
  gapsFilled: count,
  dims: count,
  frameInterval: z.number().nullable(),
  exposureFraction: z.number(),
  exposureStated: z.boolean(),
  tracks: count,
  frames: count,
  displacements: count,
  segments: count,
  gaps: count,
  msd: msd.nullable(),
  lineFit: z.object({ lagFirst: count, lagLast: count, D: z.number(), intercept: z.number() }).nullable(),
  stokesEinstein: z
    .object({
      viscosity: z.number().nullable(),
      diameter: estimate.nullable(),
      apparentViscosity: estimate.nullable(),
      expectedD: z.number().nullable(),
    })
    .nullable(),
  warnings: z.array(z.object({ code: z.string(), level: z.enum(['look', 'problem']), message: z.string() })),
  checks: z.array(
    z.object({
      code: z.string(),
      level: z.enum(['fine', 'look', 'problem']),
      p: z.number().nullable(),
      message: z.string(),
    }),
  ),
  exclusions: z.array(
    z.object({ reason: z.string(), what: z.enum(['rows', 'tracks', 'axes', 'displacements']), count }),
  ),
});

export const readingSummary: z.ZodType<ReadingSummary> = z.object({
  rows: count,
  tracks: count,
  frames: count,
  longestTrackFrames: count,
  shortestTrackFrames: count,
  gaps: count,
  missingFrames: count,
  frameInterval: z.number().nullable(),
  dims: count,
  badRows: count,
  bounds: z.array(z.tuple([z.number(), z.number()])),
});
