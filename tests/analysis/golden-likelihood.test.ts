import { describe, expect, test } from 'vitest';
import { DEFAULT_SETTINGS } from '../../analysis/analyse';
import { noiseShape, standardErrors } from '../../analysis/estimators/likelihood';
import { segmentsOf } from '../../analysis/input/segments';
import { spectrumOf } from '../../analysis/spectrum/spectrum';
import { fitAlternatives } from '../../analysis/verdict/alternatives';
import { chosen, fitFree, freeShape } from '../../analysis/verdict/free-fit';
import { apart, goldenCase, goldenNames, goldenTrajectories, prepared, succeed } from './golden';

const fitted = goldenNames.filter((name) => name !== 'g00_hand');

/** Everything between the positions and the result, for one golden case. */
function fits(name: string) {
  const facts = goldenCase(name);
  const { tracks, dims } = prepared([goldenTrajectories(name)]);
  const { segments } = segmentsOf(tracks);
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

  test('the result carries these numbers, and its interval holds the truth or is held against it', () => {
    const result = succeed([goldenTrajectories(name)]);
    expect(apart(result.D!.value, reference.mle.D_mle)).toBeLessThan(1e-6);
    expect(result.D!.lo).toBeLessThan(result.D!.value);
    expect(result.D!.hi).toBeGreaterThan(result.D!.value);
    if (facts.truth.verdict === 'free' && facts.truth.D !== undefined) {
      // Three standard errors: these files are fixed, and a correct 95 % interval may miss one of them.
      expect(Math.abs(result.D!.value - facts.truth.D)).toBeLessThan(3 * reference.mle.se_D);
    }
  });

  test('the verdict is the true one; what departs from free diffusion is undecided in this version', () => {
    const { verdict, sentence } = succeed([goldenTrajectories(name)]);
    const known = ['free', 'directed', 'undecided'].includes(facts.truth.verdict);
    expect(verdict).toBe(known ? facts.truth.verdict : 'undecided');
    if (!known) expect(sentence).toContain('departs from free diffusion');
  });
});
