import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, test } from 'vitest';
import { applyStated, type Stated } from '../../analysis/intake/apply-stated';
import { inspectFile } from '../../analysis/intake/inspect-file';
import { readTrajectories } from '../../analysis/intake/read-trajectories';
import type { Trajectories } from '../../analysis/types';
import { succeed } from './golden';

/**
 * Measured data that others published. They are not part of the project; where they lie beside it (see
 * DEVELOPERS.md) they are used, elsewhere these tests are skipped with this reason.
 */
const FOLDER = path.resolve(import.meta.dirname, '../../../shared/real');
const present = existsSync(path.join(FOLDER, 'perrin1913_displacements_508.csv'));
if (!present) console.info(`skipped: there are no measured data at ../shared/real beside the project`);

function load(name: string, stated: Stated = {}): Trajectories {
  const bytes = new Uint8Array(readFileSync(path.join(FOLDER, name)));
  const inspection = inspectFile(bytes, name);
  if (inspection.failed) throw new Error(inspection.message);
  const outcome = readTrajectories(bytes, applyStated(inspection, stated).spec);
  if (outcome.failed) throw new Error(outcome.message);
  return { ...outcome.trajectories, hash: name };
}

describe.skipIf(!present)('Perrin’s grains (data files needed: ../shared/real)', () => {
  test('1913, 508 displacements in 30 s, σ = 0: the interval holds the printed 0.512 µm²/s', () => {
    // J. Perrin, Les Atomes, 1913: mean square displacement (7.84 µm)² in 30 s, so D = 7.84²/120.
    const result = succeed([load('perrin1913_displacements_508.csv')], { sigma: 0 });
    expect(result.displacements).toBe(508);
    expect(result.D!.value).toBeCloseTo(0.5503, 4);
    expect(result.D!.lo).toBeCloseTo(0.5051, 4);
    expect(result.D!.hi).toBeCloseTo(0.601, 3);
    const printed = 7.84 ** 2 / 120;
    expect(result.D!.lo).toBeLessThan(printed);
    expect(result.D!.hi).toBeGreaterThan(printed);
    expect(result.verdict).toBe('undecided');
    expect(result.sentence).toContain('only two positions');
  });

  test('1913 without a stated σ: it is taken as zero, with a warning', () => {
    const result = succeed([load('perrin1913_displacements_508.csv')]);
    expect(result.D!.value).toBeCloseTo(0.5503, 4);
    expect(result.warnings.map((one) => one.code)).toContain('two-point-tracks');
  });

  test('1909, three mastic grains: the interval meets what Stokes–Einstein expects, 0.35 to 0.40 µm²/s', () => {
    // J. Perrin 1909, Ann. Chim. Phys. 18:1; d = 1.06 µm in water at 15 to 20 °C.
    const result = succeed([load('perrin1909_mastic_tracks.csv')]);
    expect(result.tracks).toBe(3);
    expect(result.D!.lo).toBeLessThan(0.4);
    expect(result.D!.hi).toBeGreaterThan(0.35);
  });
});

test.skipIf(!present)(
  'spheres that a flow carries while the picture shakes (data file needed: ../shared/real)',
  () => {
    // Imamura, Kent, Taylor & Bergbreiter 2024, arXiv 2412.15152, companion data: 11 spheres, mean velocity (1.78, −0.75) µm/s,
    // speed 1.94 ± 0.16 µm/s between spheres; most of each step is shaking of the picture.
    const result = succeed([load('flow_polystyrene_fiducials.csv', { pixelSize: '0.43164' })]);
    expect(result.verdict).toBe('directed');
    expect(Math.abs(result.drift!.speed - 1.94)).toBeLessThan(0.16);
    expect(Math.abs(result.drift!.velocity[0]! - 1.78)).toBeLessThan(0.16);
    expect(Math.abs(result.drift!.velocity[1]! + 0.75)).toBeLessThan(0.16);
    const codes = [...result.warnings, ...result.checks.filter((one) => one.level !== 'fine')].map(
      (one) => one.code,
    );
    expect(codes).toEqual(
      expect.arrayContaining(['shared-motion', 'drift-ambiguous', 'spread-too-wide', 'one-d']),
    );
  },
);
