import { describe, expect, test } from 'vitest';
import { seededRandom } from '../../analysis/random';
import { stationarySeries } from '../../analysis/simulate/gaussian-series';
import { scenarioMaker, type Scenario } from '../../analysis/simulate/scenario';
import { anomalousMsd, boxMsd, confinedMsd, displacementCovariance } from '../../analysis/spectrum/models';
import { simulateWalk } from '../../analysis/simulate/walk';
import { apart, prepared, succeed } from './golden';

describe('simulated series', () => {
  test.each([
    ['power 0.6', anomalousMsd(0.6, 1)],
    ['power 1.4', anomalousMsd(1.4, 0)],
    ['trap', confinedMsd(0.3, 1)],
  ])('%s: covariances are those that were asked for (Davies & Harte 1987, Biometrika 74:95)', (_, msd) => {
    const gamma = displacementCovariance(msd, 16);
    const draw = stationarySeries(gamma, seededRandom(4));
    const repeats = 20_000;
    const sums = new Float64Array(16);
    for (let i = 0; i < repeats; i++) {
      const series = draw();
      for (let lag = 0; lag < 16; lag++) sums[lag]! += (series[0]! * series[lag]!) / repeats;
    }
    gamma.forEach((value, lag) =>
      expect(Math.abs(sums[lag]! - value)).toBeLessThan(5 * gamma[0]! * Math.sqrt(2 / repeats)),
    );
  });

  test('what cannot be embedded is refused', () => {
    expect(() => stationarySeries(Float64Array.of(1, 2, 3), seededRandom(1))).toThrow('not positive');
  });
});

describe('reflecting walls', () => {
  test('the sum of modes is the known curve without blur (Kusumi et al. 1993, Biophys. J. 65:2021), L = D = 1', () => {
    // MSD(t) of one axis at t = 0.01, 0.05, 0.1, 0.5; here Δt = t and n = 1, so q = π²t and lengths are in √t.
    for (const [t, expected] of [
      [0.01, 0.01699099],
      [0.05, 0.06636499],
      [0.1, 0.10544699],
      [0.5, 0.16548536],
    ] as const)
      expect(apart(boxMsd(Math.PI ** 2 * t, 0)(1) * t, expected)).toBeLessThan(2e-4);
  });

  test('with blur it is what a simulated walk between walls shows', () => {
    const random = seededRandom(8);
    const physics = { D: 1, interval: 1, exposure: 1, sigma: 0, velocity: [0], box: 3 };
    const [x] = simulateWalk(physics, 60_000, random);
    for (const lag of [1, 2, 6]) {
      let sum = 0;
      for (let i = lag; i < x!.length; i++) sum += (x![i]! - x![i - lag]!) ** 2;
      expect(apart(sum / (x!.length - lag), boxMsd(Math.PI ** 2 / 9, 1)(lag))).toBeLessThan(0.03);
    }
  });
});

describe('what confined positions say of their boundary', () => {
  const base: Omit<Scenario, 'motion'> = { tracks: 20, frames: 150, dims: 2, x: 0.25, exposure: 1 };

  test('walls are told from a well, and D is right for both', () => {
    const counts = { walls: 0, well: 0, wrong: 0 };
    let held = 0;
    for (let seed = 1; seed <= 15; seed++) {
      const box = succeed([scenarioMaker({ ...base, motion: { kind: 'box', width: 6 } })(seed)]);
      const trap = succeed([scenarioMaker({ ...base, motion: { kind: 'trap', q: 1 / 3 } })(seed)]);
      if (box.confinement?.boundary === 'walls') counts.walls += 1;
      if (trap.confinement?.boundary === 'well') counts.well += 1;
      if (box.confinement?.boundary === 'well' || trap.confinement?.boundary === 'walls') counts.wrong += 1;
      for (const { D } of [box, trap]) if (D && D.lo! <= 1 && D.hi! >= 1) held += 1;
    }
    expect(counts.walls).toBeGreaterThan(10);
    expect(counts.well).toBeGreaterThan(10);
    expect(counts.wrong).toBeLessThan(2);
    expect(held).toBeGreaterThan(25);
  });
});

test('a scenario says what it is: tracks, frames, axes, gaps', () => {
  const { tracks, dims } = prepared([
    scenarioMaker({
      motion: { kind: 'own', speed: 2 },
      tracks: 5,
      frames: 40,
      dims: 3,
      x: 0,
      exposure: 0,
      missing: 0.1,
    })(3),
  ]);
  expect(dims).toBe(3);
  expect(tracks.length).toBe(5);
  for (const track of tracks) {
    expect(track.frames.at(-1)).toBe(39);
    expect(track.frames.length).toBeLessThan(40);
  }
});
