import { describe, expect, test } from 'vitest';
import { DEFAULT_SETTINGS } from '../../analysis/analyse';
import { noiseShape, standardErrors } from '../../analysis/estimators/likelihood';
import { segmentsOf } from '../../analysis/input/segments';
import { stepsOf } from '../../analysis/input/steps';
import { spectrumOf } from '../../analysis/spectrum/spectrum';
import { fitAlternatives } from '../../analysis/verdict/alternatives';
import { chosen, fitFree, freeShape } from '../../analysis/verdict/free-fit';
import type { Estimate } from '../../analysis/types';
import { apart, goldenCase, goldenNames, goldenTrajectories, prepared, succeed } from './golden';

const fitted = goldenNames.filter((name) => name !== 'g00_hand');

/** Everything between the positions and the result, for one golden case. */
function fits(name: string) {
  const facts = goldenCase(name);
  const { tracks, dims } = prepared([goldenTrajectories(name)]);
  const { segments } = segmentsOf(stepsOf(tracks));
  const spectrum = spectrumOf(segments, dims);
  const free = fitFree(spectrum, facts.exposure_fraction, DEFAULT_SETTINGS);
  const used = chosen(spectrum, free);
  const alternatives = fitAlternatives({
    spectrum: used.spectrum,
    b: free.b,
    free: used.fit,
    freeShape: freeShape(spectrum, facts.exposure_fraction),
    knownS: null,
    blurFraction: facts.exposure_fraction,
    dispersion: 1,
    tracks: tracks.length,
  });
  return { facts, spectrum, free, used, alternatives, segments };
}

describe.each(fitted)('%s against an independent program', (name) => {
  const { facts, spectrum, free, used, alternatives, segments } = fits(name);
  const { reference } = facts;

  test('the same segments and displacements are used', () => {
    expect(segments.length).toBe(reference.decision_prototype.nseg);
    expect(spectrum.displacements).toBe(reference.decision_prototype.ndisp);
  });

  test('maximum-likelihood D, σ² and their standard errors agree to 1e-6', () => {
    expect(apart(used.fit.delta / facts.dt_s, reference.mle.D_mle)).toBeLessThan(1e-6);
    expect(apart(used.fit.s, reference.mle.s2_mle, used.fit.delta)).toBeLessThan(1e-6);
    const errors = standardErrors(used.spectrum, free.a, noiseShape(used.spectrum), used.fit)!;
    expect(apart(errors.delta / facts.dt_s, reference.mle.se_D)).toBeLessThan(1e-6);
    expect(apart(errors.s, reference.mle.se_s2)).toBeLessThan(1e-6);
  });

  test('the common velocity and its likelihood ratio agree', () => {
    const drifting = free.drifting!;
    const raw = free.still.minus2LogL - drifting.fit.minus2LogL;
    // The reference program optimises numerically and says ± 0.01 of itself.
    expect(Math.abs(raw - reference.lr_exact.T_V)).toBeLessThan(0.01);
    const se = drifting.se / facts.dt_s;
    for (const [axis, v] of reference.lr_exact.v.entries())
      expect(Math.abs(drifting.step[axis]! / facts.dt_s - v) / se).toBeLessThan(1e-3);
    expect(free.driftRemoved).toBe(reference.mle.drift_used.some((v) => v !== 0));
  });

  test('the statistics of the other models agree within 0.01, α within 0.002', () => {
    // The reference lets α go down to 0.03, the product to 0.05: only g08 (a box) reaches that edge.
    const { anomalous, confined, individual } = alternatives;
    if (name !== 'g08_box') {
      expect(Math.abs(anomalous.statistic - reference.lr_exact.T_A)).toBeLessThan(0.01);
      expect(Math.abs(anomalous.shape - reference.lr_exact.alpha)).toBeLessThan(0.002);
    }
    expect(Math.abs(confined.statistic - reference.lr_exact.T_C)).toBeLessThan(0.01);
    if (individual) expect(Math.abs(individual.statistic - reference.lr_exact.T_W)).toBeLessThan(0.01);
  });

  test('a result without departure carries these numbers; its interval goes with the truth', () => {
    const result = succeed([goldenTrajectories(name)]);
    if (!['free', 'directed', 'undecided'].includes(facts.truth.verdict)) return;
    const reference = facts.reference.after_common_mode_removal ?? facts.reference.mle;
    expect(apart(result.D!.value, reference.D_mle)).toBeLessThan(1e-6);
    expect(result.D!.lo).toBeLessThan(result.D!.value);
    expect(result.D!.hi).toBeGreaterThan(result.D!.value);
    if (facts.truth.D !== undefined) {
      // Three standard errors: these files are fixed, and a correct 95 % interval may miss one of them.
      expect(Math.abs(result.D!.value - facts.truth.D)).toBeLessThan(3 * reference.se_D);
    }
  });

  test('the verdict is the true one, and motion that all share is found where it is', () => {
    const { verdict, sharedMotion, mislinks } = succeed([goldenTrajectories(name)]);
    expect(verdict).toBe(facts.truth.verdict);
    expect(mislinks).toBe(facts.reference.quality.n_outlier_cuts);
    if (sharedMotion) {
      expect(Math.abs(sharedMotion.z - facts.reference.quality.common_mode_z)).toBeLessThan(0.01);
      expect(sharedMotion.removed).toBe(name === 'g12_stage_drift');
    }
  });
});

describe('what was simulated is found again, within its interval', () => {
  const inside = (found: Estimate | null, truth: number) => {
    expect(found!.lo).toBeLessThan(truth);
    expect(found!.hi).toBeGreaterThan(truth);
  };

  test('a harmonic trap: D = 0.5 µm²/s, κ = 2/s, so L = √(12D/κ) = 1.732 µm', () => {
    const result = succeed([goldenTrajectories('g07_harmonic_trap')]);
    inside(result.D, 0.5);
    inside(result.L, 1.732050808);
    inside(result.confinement!.relaxationTime, 0.5);
    expect(result.confinement!.boundary).toBe('well');
    expect(result.confinement!.circleRadius.value).toBeCloseTo((2 * result.L!.value) / Math.sqrt(12), 12);
    expect(result.confinement!.sphereRadius.value).toBeCloseTo(Math.sqrt(5 / 12) * result.L!.value, 12);
  });

  test('a reflecting box 1 µm wide with D = 0.5 µm²/s', () => {
    const result = succeed([goldenTrajectories('g08_box')]);
    inside(result.L, 1);
    expect(result.confinement!.boundary).toBe('walls');
    // This file lies 2.1 standard errors above; three are allowed, for it is one file.
    const error = Math.log(result.D!.hi! / result.D!.lo!) / 3.92;
    expect(Math.abs(Math.log(result.D!.value / 0.5)) / error).toBeLessThan(3);
    expect(result.excludedWidth).toBeLessThan(1);
  });

  test.each([
    ['g09_fbm_sub', 0.6],
    ['g10_fbm_super', 1.4],
  ])('%s: α = %d and K = 0.2 µm²/s^α, and no D', (name, alpha) => {
    const result = succeed([goldenTrajectories(name)]);
    inside(result.alpha, alpha);
    inside(result.K, 0.2);
    expect(result.D).toBeNull();
    expect(result.stokesEinstein).toBeNull();
  });
});
