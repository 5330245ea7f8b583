import { describe, expect, test } from 'vitest';
import { seededRandom } from '../../../analysis/random';
import {
  displacementVariance,
  expectedCounts,
  nonGaussian,
  widthAtHalfHeight,
} from '../../../analysis/reach/displacements';
import { apart } from '../golden';

describe('the predicted distribution of displacements', () => {
  test('its variance has blur and noise (Savin & Doyle 2005; full exposure, D = Δt = 1: 4/3, 10/3, 16/3)', () => {
    const imaging = { interval: 1, exposure: 1, sigma: 0 };
    [4 / 3, 10 / 3, 16 / 3].forEach((value, i) =>
      expect(displacementVariance(1, i + 1, imaging)).toBeCloseTo(value, 12),
    );
    const noisy = { interval: 0.1, exposure: 0, sigma: 0.03 };
    expect(displacementVariance(0.5, 2, noisy)).toBeCloseTo(0.2 + 0.0018, 14);
    expect(() => displacementVariance(1, 0, imaging)).toThrow('lag');
    expect(() => displacementVariance(1, 1, { ...imaging, exposure: 2 })).toThrow('exposure');
  });

  test('width at half height is 4√(Dt ln 2) without blur and noise: 3.3302184446 √(Dt)', () => {
    expect(apart(widthAtHalfHeight(2 * 0.4 * 3), 3.3302184446 * Math.sqrt(0.4 * 3))).toBeLessThan(1e-10);
  });

  test('bins of one standard deviation hold 34.13, 13.59 and 2.14 % (table of the normal law)', () => {
    const counts = expectedCounts([-3, -2, -1, 0, 1, 2, 3], 1e6, 1);
    [21400, 135905, 341345, 341345, 135905, 21400].forEach((value, i) =>
      expect(Math.abs(counts[i]! - value)).toBeLessThan(1),
    );
    expect(expectedCounts([-1, 1], 1, 1)[0]).toBeCloseTo(0.6826894921, 9);
    expect(expectedCounts([0, 2], 1, 1, 1)[0]).toBeCloseTo(0.6826894921, 9);
    // Far out: 1 − Φ(10) = 7.6199e-24.
    expect(apart(expectedCounts([10, 1000], 1, 1)[0]!, 7.61985302416e-24)).toBeLessThan(1e-9);
  });
});

describe('the non-Gaussian parameter (Rahman 1964, Phys. Rev. 136:A405)', () => {
  test.each([1, 2, 3])('is zero within its stated error for normal displacements of %i axes', (d) => {
    const random = seededRandom(5 + d);
    const n = 400;
    let squares = 0;
    const repeats = 400;
    for (let i = 0; i < repeats; i++) {
      const axes = Array.from({ length: d }, () => Array.from({ length: n }, () => random.gaussian()));
      const { value, se } = nonGaussian(axes)!;
      squares += (value / se) ** 2 / repeats;
    }
    // A mean of 400 squares scatters by 7 %; the error is exact for many displacements only.
    expect(squares).toBeGreaterThan(0.7);
    expect(squares).toBeLessThan(1.3);
  });

  test('is CV²(D) for a mixture of two kinds of walkers, and −2/3 for steps of one size', () => {
    const random = seededRandom(9);
    const steps = Array.from({ length: 200_000 }, (_, i) => random.gaussian() * Math.sqrt(i % 2 ? 1 : 3));
    // D of 1 and 3: mean 2, variance 1.
    const { value, se } = nonGaussian([steps])!;
    expect(Math.abs(value - 0.25)).toBeLessThan(8 * se);
    expect(nonGaussian([[1, -1, 1, 1]])!.value).toBeCloseTo(-2 / 3, 14);
    expect(
      nonGaussian([
        [0, 0],
        [0, 0],
      ]),
    ).toBeNull();
    expect(nonGaussian([steps.slice(0, 100)], 4)!.se).toBeCloseTo(Math.sqrt(32 / 300), 12);
  });
});
