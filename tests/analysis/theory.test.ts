import { describe, expect, test } from 'vitest';
import { relativeError } from '../../analysis/estimators/covariance';
import { driftFor } from '../../analysis/estimators/drift';
import { noiseShape, standardErrors } from '../../analysis/estimators/likelihood';
import { msdCovariance, msdVariance } from '../../analysis/msd/msd-error';
import { optimalLags } from '../../analysis/msd/line-fit';
import {
  anomalousMsd,
  confinedMsd,
  displacementCovariance,
  freeMsd,
  type MsdFunction,
} from '../../analysis/spectrum/models';
import {
  driftSpectrum,
  noiseSpectrum,
  sineTransform,
  stationarySpectrum,
} from '../../analysis/spectrum/sine-transform';
import type { Spectrum } from '../../analysis/spectrum/spectrum';
import { freeShape } from '../../analysis/verdict/free-fit';
import { apart } from './golden';

/**
 * Figures of the theory that were computed elsewhere (dense matrices and double sums, double precision): each names the
 * paper that its formula comes from.
 */

/** A spectrum of M series of N displacements with given power: all that bounds and shapes depend on. */
function emptySpectrum(length: number, segments = 1, dims = 1): Spectrum {
  const zeros = () => new Float64Array(length);
  return {
    dims,
    groups: [
      {
        length,
        segments,
        power: zeros(),
        fourth: zeros(),
        sums: Array.from({ length: dims }, zeros),
      },
    ],
    coefficients: length * segments * dims,
    displacements: length * segments,
  };
}

describe('the scatter of MSD points (Qian, Sheetz & Elson 1991, Biophys. J. 60:910)', () => {
  const free: MsdFunction = (n) => 2 * n;

  test.each([
    [1, 0.16],
    [2, 0.966431996735],
    [5, 13.993055555556],
    [10, 114.614177031759],
    [50, 19743.790849673],
    [60, 35855.609756098],
  ])('variance at lag %i of a track of 101 positions in two dimensions, D = Δt = 1', (lag, expected) => {
    expect(apart(msdVariance(free, 101, lag, 2), expected)).toBeLessThan(1e-11);
    expect(apart(msdCovariance(free, 101, lag, lag, 2), expected)).toBeLessThan(1e-11);
  });

  test('covariance of two points', () => {
    expect(apart(msdCovariance(free, 101, 1, 2, 2), 0.32)).toBeLessThan(1e-11);
    expect(apart(msdCovariance(free, 101, 1, 10, 2), 1.6)).toBeLessThan(1e-11);
  });

  test('the short sum for free diffusion equals the full one, with noise and blur too', () => {
    const noisy: MsdFunction = (n) => (n === 0 ? 0 : 2 * n * 0.3 - 0.2 * 0.3 + 2 * 0.05);
    for (const lag of [1, 2, 3, 7, 20, 29])
      expect(apart(msdVariance(noisy, 30, lag, 3), msdCovariance(noisy, 30, lag, lag, 3))).toBeLessThan(
        1e-12,
      );
  });
});

describe('the best precision of D and σ² (Berglund 2010, Phys. Rev. E 82:011917; Cramér–Rao bound)', () => {
  test.each([
    { n: 10, x: 0, e: 0, D: 0.6444444444, s: 0.4444444444 },
    { n: 50, x: 0.25, e: 1, D: 0.1143906437, s: 0.031460014 },
    { n: 100, x: 1, e: 1, D: 0.0820462646, s: 0.0733298535 },
    { n: 100, x: 0, e: 1, D: 0.0432297908, s: 0.0048518283 },
    { n: 1000, x: 0.5, e: 0, D: 0.0076648639, s: 0.0087508931 },
  ])('one axis, $n displacements, σ²/(DΔt) = $x, exposure $e', ({ n, x, e, D, s }) => {
    const spectrum = emptySpectrum(n);
    const errors = standardErrors(spectrum, freeShape(spectrum, e), noiseShape(spectrum), {
      delta: 1,
      s: x,
      minus2LogL: 0,
    })!;
    // Two of the figures are off in their eighth digit: an exactly rounded sum gives 0.00766486370 and 0.00485182837.
    expect(apart(errors.delta ** 2, D)).toBeLessThan(5e-8);
    expect(apart(errors.s ** 2, s)).toBeLessThan(5e-8);
  });

  test('for long series N·Var(D)/D² approaches 2 + 4√(1 + 2ε)', () => {
    for (const [x, e] of [
      [0, 0],
      [1, 0],
      [4, 0],
      [0.25, 1],
    ] as const) {
      const n = 20_000;
      const spectrum = emptySpectrum(n);
      const errors = standardErrors(spectrum, freeShape(spectrum, e), noiseShape(spectrum), {
        delta: 1,
        s: x,
        minus2LogL: 0,
      })!;
      const epsilon = x - e / 3;
      expect(apart(n * errors.delta ** 2, 2 + 4 * Math.sqrt(1 + 2 * epsilon))).toBeLessThan(2e-3);
    }
  });

  test('the precision of a common velocity of one track: N = 50, x = 1, full exposure', () => {
    const spectrum = emptySpectrum(50);
    const { se } = driftFor(spectrum, freeShape(spectrum, 1), noiseShape(spectrum), {
      delta: 1,
      s: 1,
      minus2LogL: 0,
    });
    expect(apart(se ** 2, 0.0404265)).toBeLessThan(1e-5);
  });

  test('the covariance-based estimator (Vestergaard, Blainey & Flyvbjerg 2014, Phys. Rev. E 89:022726)', () => {
    expect(apart(relativeError(0.25 - 1 / 3, 50) ** 2, 0.1149555556)).toBeLessThan(1e-9);
    expect(apart(relativeError(1 - 1 / 3, 100) ** 2, 0.0966667)).toBeLessThan(1e-6);
    expect(apart(relativeError(0, 10) ** 2, 0.64)).toBeLessThan(1e-12);
  });

  test('the number of lags for a line fit (Michalet & Berglund 2012, Phys. Rev. E 85:061916)', () => {
    expect([0, 0.25, 1, 4, 10, 100].map((x) => optimalLags(x, 101))).toEqual([2, 2, 3, 5, 7, 23]);
  });
});

describe('model curves per axis, D = Δt = 1', () => {
  const at = (m: MsdFunction) => [1, 2, 3, 4].map(m);
  const near = (got: readonly number[], expected: readonly number[]) =>
    expected.forEach((value, i) => expect(got[i]).toBeCloseTo(value, 7));

  test('free diffusion, full exposure (Goulian & Simon 2000, Biophys. J. 79:2188): 4/3, 10/3, 16/3', () => {
    near([1, 2, 3].map(freeMsd(1)), [4 / 3, 10 / 3, 16 / 3]);
  });

  test('fractional Brownian motion, α = 0.6 (Mandelbrot & Van Ness 1968; blur: Backlund et al. 2015)', () => {
    near(at(anomalousMsd(0.6, 1)), [0.99176263, 2.05428167, 2.89612347, 3.62747057]);
    near(at(anomalousMsd(0.6, 0)), [2, 3.03143313, 3.86636409, 4.59479342]);
  });

  test('a harmonic well, κΔt = 0.4', () => {
    near(at(confinedMsd(0.4, 1)), [0.99847563, 2.11824257, 2.86884481, 3.37198853]);
    near(at(confinedMsd(0.4, 0)), [1.64839977, 2.75335518, 3.49402894, 3.99051741]);
  });

  test('at α = 1, and for an endlessly weak well, both are free diffusion', () => {
    for (const e of [0, 0.3, 1])
      for (const n of [1, 2, 10, 400]) {
        expect(apart(anomalousMsd(1, e)(n), freeMsd(e)(n))).toBeLessThan(1e-9);
        expect(apart(confinedMsd(1e-7, e)(n), freeMsd(e)(n))).toBeLessThan(1e-3);
      }
  });

  test('the series that replace differences of large numbers meet them where they take over', () => {
    for (const alpha of [0.2, 0.8, 1.7]) {
      const m = anomalousMsd(alpha, 0.5);
      const steps = [98, 99, 100, 101, 102].map((n) => m(n + 1) - m(n));
      for (let i = 1; i < steps.length; i++) expect(apart(steps[i]!, steps[i - 1]!)).toBeLessThan(0.02);
    }
  });
});

describe('spectra (debiased Whittle: Sykulski et al. 2019, Biometrika 106:251), N = 5', () => {
  const near = (got: Float64Array, expected: readonly number[]) =>
    expected.forEach((value, i) => expect(got[i]).toBeCloseTo(value, 7));
  const spectrum = (m: MsdFunction) => stationarySpectrum(displacementCovariance(m, 5));

  test('figures of the three motions with full exposure, of noise and of drift', () => {
    near(spectrum(freeMsd(1)), [1.9106836, 1.66666667, 1.33333333, 1, 0.75598306]);
    near(spectrum(anomalousMsd(0.6, 1)), [0.88645385, 1.15543799, 1.11504012, 0.97418689, 0.82769429]);
    near(spectrum(confinedMsd(0.4, 1)), [0.80291276, 1.31661082, 1.1892933, 0.94786099, 0.73570026]);
    near(noiseSpectrum(5), [0.26794919, 1, 2, 3, 3.73205081]);
    near(driftSpectrum(5), [2.15470054, 0, 0.57735027, 0, 0.15470054]);
  });

  test.each([1, 2, 3, 12, 61, 300, 301])('equals the dense matrix for N = %i', (n) => {
    const gamma = displacementCovariance(anomalousMsd(0.7, 0.8), n);
    const fast = stationarySpectrum(gamma);
    for (const k of [1, 2, Math.ceil(n / 2), n].filter((one) => one <= n)) {
      let dense = 0;
      for (let i = 1; i <= n; i++)
        for (let j = 1; j <= n; j++)
          dense +=
            Math.sin((Math.PI * k * i) / (n + 1)) *
            Math.sin((Math.PI * k * j) / (n + 1)) *
            gamma[Math.abs(i - j)]!;
      expect(apart(fast[k - 1]!, (2 * dense) / (n + 1))).toBeLessThan(1e-10);
    }
  });

  test.each([1, 2, 5, 64, 255, 256, 257, 700])('the sine transform of %i numbers is its own inverse', (n) => {
    const x = Float64Array.from({ length: n }, (_, i) => Math.cos(i * i) + 0.1 * i);
    const back = sineTransform(sineTransform(x));
    const size = Math.hypot(...x);
    x.forEach((value, i) => expect(Math.abs(back[i]! - value) / size).toBeLessThan(1e-12));
  });

  test('drift is the sine transform of a constant', () => {
    const constant = sineTransform(new Float64Array(300).fill(1));
    driftSpectrum(300).forEach((value, k) => expect(constant[k]).toBeCloseTo(value, 9));
  });
});
