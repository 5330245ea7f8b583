import { describe, expect, test } from 'vitest';
import {
  crossedBy,
  crossingDensity,
  meanTimeAcross,
  meanTimeOut,
  meanTimeToEitherSide,
  timeUntilCrossed,
} from '../../../analysis/reach/passage';
import { seededRandom } from '../../../analysis/random';

describe('mean first-passage times (Berg, Random Walks in Biology)', () => {
  test('across a slab, to either side, out of a circle and a sphere', () => {
    expect(meanTimeAcross(0.5, 2)).toBe(4);
    expect(meanTimeToEitherSide(0.5, 2)).toBe(1);
    expect(meanTimeToEitherSide(0.5, 2, 0.5)).toBe(0.75);
    expect(meanTimeOut(0.5, 2, 2)).toBe(2);
    expect(meanTimeOut(0.5, 2, 3)).toBeCloseTo(4 / 3, 14);
  });

  test('a mean time equals the step before it plus the mean of its neighbours (lattice walk)', () => {
    // The defining equation T(x) = h²/(2D) + (T(x−h) + T(x+h))/2 holds exactly for these quadratics.
    const h = 0.1;
    for (const f of [(x: number) => meanTimeAcross(1, 3, x), (x: number) => meanTimeToEitherSide(1, 3, x)]) {
      for (const x of [0.5, 1.2, 2.5]) expect(f(x)).toBeCloseTo((h * h) / 2 + (f(x - h) + f(x + h)) / 2, 12);
    }
  });

  test('a start outside is refused', () => {
    expect(() => meanTimeAcross(1, 1, 2)).toThrow('start');
    expect(() => meanTimeOut(0, 1, 2)).toThrow('D');
  });
});

describe('time for a molecule to cross a gap', () => {
  test('both series agree where one takes over from the other', () => {
    expect(crossedBy(1, 1, 0.25)).toBeCloseTo(crossedBy(1, 1, 0.25 - 1e-13), 11);
    expect(crossingDensity(1, 1, 0.25)).toBeCloseTo(crossingDensity(1, 1, 0.25 - 1e-13), 10);
  });

  test('mean L²/2D and variance L⁴/6D² (cumulants of 1/cosh √s, its Laplace transform)', () => {
    const D = 300;
    const L = 0.02;
    const unit = (L * L) / D;
    let whole = 0;
    let mean = 0;
    let square = 0;
    const steps = 20_000;
    for (let i = 1; i < steps; i++) {
      const t = (i / steps) * 12 * unit;
      const weight = crossingDensity(D, L, t) * ((12 * unit) / steps);
      whole += weight;
      mean += weight * t;
      square += weight * t * t;
    }
    expect(whole).toBeCloseTo(1, 9);
    expect(mean / unit).toBeCloseTo(0.5, 9);
    expect((square - mean ** 2) / unit ** 2).toBeCloseTo(1 / 6, 9);
  });

  test('the density is the slope of the probability', () => {
    for (const t of [0.05, 0.2, 0.4, 1]) {
      const slope = (crossedBy(1, 1, t + 1e-5) - crossedBy(1, 1, t - 1e-5)) / 2e-5;
      expect(crossingDensity(1, 1, t)).toBeCloseTo(slope, 7);
    }
  });

  test('a walk on a lattice crosses as the law says', () => {
    // Steps of 1/60 of the gap; the lattice shifts the law by less than the scatter of 4000 walkers.
    const random = seededRandom(41);
    const cells = 60;
    const tau = timeUntilCrossed(1, 1, 0.5);
    const steps = Math.round(tau * 2 * cells * cells);
    let crossed = 0;
    for (let walker = 0; walker < 4000; walker++) {
      let x = 0;
      for (let i = 0; i < steps; i++) {
        x = Math.abs(x + (random.uniform() < 0.5 ? 1 : -1));
        if (x === cells) {
          crossed++;
          break;
        }
      }
    }
    // Five standard deviations of a share of one half.
    expect(Math.abs(crossed / 4000 - 0.5)).toBeLessThan(0.04);
  });

  test('shares and times undo each other, and grow from 0 to 1', () => {
    for (const share of [1e-6, 0.05, 0.5, 0.95, 0.9999])
      expect(crossedBy(2, 3, timeUntilCrossed(2, 3, share)) / share).toBeCloseTo(1, 9);
    expect(timeUntilCrossed(1, 1, 0.5)).toBeCloseTo(0.379, 3);
    expect(crossedBy(1, 1, 0)).toBe(0);
    expect(crossedBy(1, 1, 50)).toBe(1);
    expect(() => timeUntilCrossed(1, 1, 0)).toThrow('share');
  });
});
