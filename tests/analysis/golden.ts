import { readFileSync } from 'node:fs';
import { analyse, DEFAULT_SETTINGS } from '../../analysis/analyse';
import { prepare, type Prepared } from '../../analysis/input/prepare';
import { applyStated } from '../../analysis/intake/apply-stated';
import { inspectFile } from '../../analysis/intake/inspect-file';
import { readTrajectories } from '../../analysis/intake/read-trajectories';
import type { AnalysisResult, AnalysisSettings, Trajectories } from '../../analysis/types';

/**
 * Simulated files with their physics and with reference results of an independent program (numpy, double precision),
 * computed from the digits that stand in the files. `about` in golden.json says how.
 */
export interface GoldenCase {
  readonly file: string;
  readonly dt_s: number;
  readonly exposure_fraction: number;
  readonly R: number;
  readonly truth: { readonly verdict: string; readonly D?: number; readonly sigma?: number };
  readonly reference: {
    readonly lag_s: readonly number[];
    readonly pairs: readonly number[];
    readonly msd_total: readonly number[];
    readonly msd_axis: readonly (readonly number[])[];
    readonly cve: { readonly D: number; readonly sigma2: number; readonly n_displacements: number };
    readonly ols: Readonly<Record<string, { readonly D: number; readonly intercept: number }>>;
    readonly lr_exact: {
      readonly T_V: number;
      readonly v: readonly number[];
      readonly T_A: number;
      readonly alpha: number;
      readonly T_C: number;
      readonly T_W: number;
    };
    readonly mle: {
      readonly D_mle: number;
      readonly s2_mle: number;
      readonly se_D: number;
      readonly se_s2: number;
      readonly drift_used: readonly number[];
    };
    readonly after_common_mode_removal?: { readonly D_mle: number; readonly se_D: number };
    readonly quality: { readonly n_outlier_cuts: number; readonly common_mode_z: number };
    readonly decision_prototype: { readonly phi: number; readonly nseg: number; readonly ndisp: number };
  };
}

const FOLDER = new URL('../fixtures/golden/', import.meta.url);
const all = JSON.parse(readFileSync(new URL('golden.json', FOLDER), 'utf8')) as {
  cases: Record<string, GoldenCase>;
};

export const goldenNames = Object.keys(all.cases);

export function goldenCase(name: string): GoldenCase {
  const found = all.cases[name];
  if (!found) throw new Error(`there is no golden case ${name}`);
  return found;
}

/** The file's positions through the product's own intake, with the exposure that the case states. */
export function goldenTrajectories(name: string): Trajectories {
  const facts = goldenCase(name);
  const bytes = new Uint8Array(readFileSync(new URL(facts.file, FOLDER)));
  const inspection = inspectFile(bytes, facts.file);
  if (inspection.failed) throw new Error(inspection.message);
  const inPixels = name === 'g13_pixels_frames';
  const stated = inPixels ? { frameInterval: String(facts.dt_s), pixelSize: '0.107' } : {};
  const outcome = readTrajectories(bytes, applyStated(inspection, stated).spec);
  if (outcome.failed) throw new Error(outcome.message);
  return { ...outcome.trajectories, hash: name, exposure: { fraction: facts.exposure_fraction } };
}

export function succeed(
  readings: readonly Trajectories[],
  settings: Partial<AnalysisSettings> = {},
): AnalysisResult {
  const outcome = analyse(readings, { ...DEFAULT_SETTINGS, ...settings });
  if ('failed' in outcome) throw new Error(outcome.message);
  return outcome;
}

export function prepared(readings: readonly Trajectories[]): Prepared {
  const outcome = prepare(readings, DEFAULT_SETTINGS);
  if ('code' in outcome) throw new Error(outcome.message);
  return outcome;
}

/** |a − b| relative to the larger of |b| and `floor`: how far two numbers are apart. */
export function apart(a: number, b: number, floor = 1e-300): number {
  return Math.abs(a - b) / Math.max(Math.abs(b), floor);
}
