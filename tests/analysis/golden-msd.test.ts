import { describe, expect, test } from 'vitest';
import { covarianceEstimate } from '../../analysis/estimators/covariance';
import { fitLine } from '../../analysis/fit/line';
import { segmentsOf } from '../../analysis/input/segments';
import { stepsOf } from '../../analysis/input/steps';
import { apart, goldenCase, goldenNames, goldenTrajectories, prepared, succeed } from './golden';

describe('the six positions of g00, checked by hand', () => {
  // x 0 1 3 2 5 4 and y 0 0 1 1 2 4: MSD(1) = (1 + 5 + 1 + 10 + 5)/5 = 4.4, and so on.
  const result = succeed([goldenTrajectories('g00_hand')]);

  test('mean squared displacements are the exact rationals', () => {
    expect(result.msd?.lag).toEqual([1, 2, 3, 4, 5]);
    expect(result.msd?.pairs).toEqual([5, 4, 3, 2, 1]);
    [4.4, 7.5, 35 / 3, 27, 32].forEach((value, i) => expect(result.msd!.total[i]).toBeCloseTo(value, 12));
    [3.2, 4.5, 7, 17, 16].forEach((value, i) => expect(result.msd!.perAxis[0]![i]).toBeCloseTo(value, 12));
    [1.2, 3, 14 / 3, 10, 16].forEach((value, i) => expect(result.msd!.perAxis[1]![i]).toBeCloseTo(value, 12));
  });

  test('the covariance-based estimate is D = 3/5, σ² = 1/2', () => {
    const { tracks } = prepared([goldenTrajectories('g00_hand')]);
    const found = covarianceEstimate(segmentsOf(stepsOf(tracks)).segments, 1, 0)!;
    expect(found.D).toBeCloseTo(0.6, 12);
    expect(found.sigmaSquared).toBeCloseTo(0.5, 12);
    expect(found.displacements).toBe(10);
  });
});

describe.each(goldenNames)('%s against an independent program', (name) => {
  const facts = goldenCase(name);
  const trajectories = goldenTrajectories(name);
  const { reference } = facts;

  test('MSD and pair counts agree to 1e-8, per axis and in total', () => {
    const { msd } = succeed([trajectories]);
    let compared = 0;
    for (const [i, seconds] of reference.lag_s.entries()) {
      const at = msd!.lag.indexOf(Math.round(seconds / facts.dt_s));
      if (at < 0) continue;
      compared += 1;
      expect(msd!.pairs[at]).toBe(reference.pairs[i]);
      expect(apart(msd!.total[at]!, reference.msd_total[i]!)).toBeLessThan(1e-8);
      for (const [axis, values] of reference.msd_axis.entries())
        expect(apart(msd!.perAxis[axis]![at]!, values[i]!)).toBeLessThan(1e-8);
    }
    expect(compared).toBeGreaterThanOrEqual(Math.min(5, reference.lag_s.length));
  });

  test('the covariance-based estimate agrees to 1e-8', () => {
    const { tracks } = prepared([trajectories]);
    const found = covarianceEstimate(segmentsOf(stepsOf(tracks)).segments, facts.dt_s, facts.R)!;
    expect(found.displacements).toBe(reference.cve.n_displacements);
    expect(apart(found.D, reference.cve.D)).toBeLessThan(1e-8);
    expect(apart(found.sigmaSquared, reference.cve.sigma2, found.D * facts.dt_s)).toBeLessThan(1e-8);
  });

  test.each(Object.keys(reference.ols))('a straight line through lags 1 to %s agrees to 1e-8', (last) => {
    const { lineFit } = succeed([trajectories], { fitLagFirst: 1, fitLagLast: Number(last) });
    const expected = reference.ols[last]!;
    expect(lineFit).toMatchObject({ lagFirst: 1, lagLast: Number(last) });
    expect(apart(lineFit!.D, expected.D)).toBeLessThan(1e-8);
    expect(apart(lineFit!.intercept, expected.intercept, Math.abs(reference.msd_total[0]!))).toBeLessThan(
      1e-8,
    );
  });
});

test('a line through given points is that of NIST StRD "Norris", to ten digits', () => {
  // Source: NIST Statistical Reference Datasets, Linear Regression, Norris (certified values).
  const x = [
    0.2, 337.4, 118.2, 884.6, 10.1, 226.5, 666.3, 996.3, 448.6, 777.0, 558.2, 0.4, 0.6, 775.5, 666.9, 338.0,
    447.5, 11.6, 556.0, 228.1, 995.8, 887.6, 120.2, 0.3, 0.3, 556.8, 339.1, 887.2, 999.0, 779.0, 11.1, 118.3,
    229.2, 669.1, 448.9, 0.5,
  ];
  const y = [
    0.1, 338.8, 118.1, 888.0, 9.2, 228.1, 668.5, 998.5, 449.1, 778.9, 559.2, 0.3, 0.1, 778.1, 668.8, 339.3,
    448.9, 10.8, 557.7, 228.3, 998.0, 888.8, 119.6, 0.3, 0.6, 557.6, 339.3, 888.0, 998.5, 778.9, 10.2, 117.6,
    228.9, 668.4, 449.2, 0.2,
  ];
  const line = fitLine(x, y);
  expect(apart(line.intercept, -0.262323073774029)).toBeLessThan(1e-10);
  expect(apart(line.slope, 1.00211681802045)).toBeLessThan(1e-12);
  expect(apart(line.seIntercept!, 0.232818234301152)).toBeLessThan(1e-10);
  expect(apart(line.seSlope!, 0.429796848199937e-3)).toBeLessThan(1e-10);
  expect(apart(line.residual, 26.6173985294224)).toBeLessThan(1e-10);
});

test('a line that cannot be drawn is refused', () => {
  expect(() => fitLine([1], [1])).toThrow('two points');
  expect(() => fitLine([1, 1], [1, 2])).toThrow('all x are equal');
  expect(() => fitLine([1, 2], [1, NaN])).toThrow('not finite');
  expect(() => fitLine([1, 2], [1])).toThrow('2 values');
});
