import { describe, expect, test } from 'vitest';
import { seededRandom } from '../../analysis/random';
import { simulateDataSet, toCsv } from '../../analysis/simulate/data-set';
import { simulateWalk, type WalkPhysics } from '../../analysis/simulate/walk';
import { read, values } from './intake/files';
import { apart } from './golden';

describe('seeded random numbers', () => {
  test('the same seed gives the same numbers, another seed others', () => {
    const draw = (seed: number) => {
      const random = seededRandom(seed);
      return Array.from({ length: 5 }, () => random.uniform());
    };
    expect(draw(7)).toEqual(draw(7));
    expect(draw(7)).not.toEqual(draw(8));
  });

  test('mean, variance, kurtosis and tails are those of the normal law', () => {
    const random = seededRandom(1);
    const n = 200_000;
    let [m1, m2, m4, beyond] = [0, 0, 0, 0];
    for (let i = 0; i < n; i++) {
      const x = random.gaussian();
      m1 += x / n;
      m2 += x ** 2 / n;
      m4 += x ** 4 / n;
      if (Math.abs(x) > 1.959964) beyond += 1 / n;
    }
    expect(Math.abs(m1)).toBeLessThan(4 / Math.sqrt(n));
    expect(Math.abs(m2 - 1)).toBeLessThan(4 * Math.sqrt(2 / n));
    expect(Math.abs(m4 - 3)).toBeLessThan(4 * Math.sqrt(96 / n));
    expect(Math.abs(beyond - 0.05)).toBeLessThan(4 * Math.sqrt(0.0475 / n));
  });

  test('whole numbers fill their range evenly', () => {
    const random = seededRandom(3);
    const counts = new Array<number>(6).fill(0);
    for (let i = 0; i < 60_000; i++) counts[random.whole(6)]! += 1;
    // χ² with 5 degrees of freedom, 99.9 %: 20.5 (NIST/SEMATECH e-Handbook 1.3.6.7.4).
    expect(counts.reduce((sum, one) => sum + (one - 10_000) ** 2 / 10_000, 0)).toBeLessThan(20.5);
  });
});

describe('simulated walks have the physics that they state', () => {
  const physics: WalkPhysics = { D: 2, interval: 0.5, exposure: 1, sigma: 0.3, velocity: [3], box: null };

  test('MSD with blur, noise and flow: 2D(nΔt − Δt/3) + 2σ² + v²(nΔt)² (Savin & Doyle 2005, Biophys. J. 88:623)', () => {
    const random = seededRandom(11);
    const repeats = 20_000;
    const msd = [0, 0, 0];
    for (let i = 0; i < repeats; i++) {
      const [x] = simulateWalk(physics, 4, random);
      for (const lag of [1, 2, 3]) msd[lag - 1]! += (x![lag]! - x![0]!) ** 2 / repeats;
    }
    for (const lag of [1, 2, 3]) {
      const t = lag * 0.5;
      const expected = 4 * (t - 0.5 / 3) + 2 * 0.09 + 9 * t * t;
      expect(apart(msd[lag - 1]!, expected)).toBeLessThan(5 * Math.sqrt(2 / repeats));
    }
  });

  test('between reflecting walls positions fill the box evenly: variance L²/12', () => {
    const random = seededRandom(12);
    const [x] = simulateWalk({ ...physics, exposure: 0, sigma: 0, velocity: [0], box: 1 }, 20_000, random);
    const mean = x!.reduce((sum, one) => sum + one, 0) / x!.length;
    const variance = x!.reduce((sum, one) => sum + (one - mean) ** 2, 0) / x!.length;
    expect(Math.min(...x!)).toBeGreaterThanOrEqual(0);
    expect(Math.max(...x!)).toBeLessThanOrEqual(1);
    expect(apart(variance, 1 / 12)).toBeLessThan(0.05);
  });
});

test('a simulated file reads back as what it was written from', () => {
  const data = simulateDataSet({
    seed: 3,
    tracks: 4,
    frames: 15,
    missing: 0.2,
    field: 40,
    physics: () => ({ D: 0.5, interval: 0.1, exposure: 0, sigma: 0.05, velocity: [0, 0], box: null }),
  });
  const back = values(read(toCsv(data, 12)));
  expect(back.tracks).toEqual(Array.from(data.track, (at) => data.trackIds[at]));
  expect(back.time).toEqual([...data.time!]);
  back.axes.forEach((axis, i) =>
    axis.forEach((value, row) => expect(value).toBeCloseTo(data.axes[i]![row]!, 11)),
  );
});
