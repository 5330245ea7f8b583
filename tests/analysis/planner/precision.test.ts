import { describe, expect, test } from 'vitest';
import {
  axisDisplacementsFor,
  frameRates,
  precisionOf,
  tracksFor,
  type Plan,
} from '../../../analysis/planner/precision';

const PLAN: Plan = { dims: 2, tracks: 1, frames: 101, interval: 1, exposure: 1, sigma: 0, D: 1 };
const X = [0, 0.1, 0.25, 1, 4, 10];

describe('precision of D before the measurement (Cramér–Rao bound, Berglund 2010)', () => {
  test.each([
    // The bound by dense sums in another program: one track of N displacements, two axes, full exposure.
    [10, [0.473, 0.508, 0.549, 0.677, 0.948, 1.297]],
    [20, [0.331, 0.355, 0.382, 0.464, 0.6215, 0.793]],
    [50, [0.208, 0.223, 0.239, 0.288, 0.3775, 0.467]],
    [100, [0.147, 0.157, 0.169, 0.203, 0.264, 0.323]],
    [200, [0.104, 0.111, 0.119, 0.143, 0.185, 0.226]],
    [500, [0.0657, 0.0702, 0.0752, 0.0902, 0.117, 0.142]],
    [1000, [0.0464, 0.0496, 0.0532, 0.0637, 0.0824, 0.1]],
  ])('%i displacements', (n, expected) => {
    X.forEach((x, i) => {
      const { relative } = precisionOf({ ...PLAN, frames: n + 1, sigma: Math.sqrt(x) });
      expect(Math.abs(relative - expected[i]!)).toBeLessThan(expected[i]! < 0.1 ? 5.1e-5 : 5.1e-4);
    });
  });

  test('σ² has its own bound, and units are kept', () => {
    // N = 50, x = 0.25, full exposure, one axis: Var D = 0.1143906437, Var σ² = 0.0314600140 (D = Δt = 1).
    const one = precisionOf({ ...PLAN, dims: 1, frames: 51, sigma: 0.5 });
    expect(one.relative ** 2).toBeCloseTo(0.1143906437, 9);
    expect(one.sigma2 ** 2).toBeCloseTo(0.031460014, 9);
    const scaled = precisionOf({ ...PLAN, dims: 1, frames: 51, D: 0.2, interval: 0.05, sigma: 0.05 });
    expect(scaled.relative).toBeCloseTo(one.relative, 12);
    expect(scaled.sigma2).toBeCloseTo(one.sigma2 * 0.01, 12);
  });

  test('5 % at x = 0.25 and full exposure takes 2261 axis-displacements', () => {
    expect(Math.round(axisDisplacementsFor(0.05, { ...PLAN, sigma: 0.5 }))).toBe(2261);
  });

  test('the tracks that are said to suffice do, and one fewer does not', () => {
    const plan = { ...PLAN, frames: 96, sigma: 0.5 };
    const tracks = tracksFor(0.05, plan);
    expect(precisionOf({ ...plan, tracks }).relative).toBeLessThanOrEqual(0.05);
    expect(precisionOf({ ...plan, tracks: tracks - 1 }).relative).toBeGreaterThan(0.05);
    // The formula for long tracks says 12 of 95 displacements; short ones need little more.
    expect([12, 13]).toContain(tracks);
  });

  test('what cannot be carried out is refused', () => {
    expect(() => precisionOf({ ...PLAN, frames: 2 })).toThrow('frames');
    expect(() => precisionOf({ ...PLAN, tracks: 1.5 })).toThrow('tracks');
    expect(() => precisionOf({ ...PLAN, exposure: 2 })).toThrow('exposure');
    expect(() => tracksFor(0, PLAN)).toThrow('target');
  });
});

describe('frame rate at a fixed duration', () => {
  const plan = { ...PLAN, exposure: 0, sigma: 1 };

  test('with one error a frame, faster is always better; as Δt^¼ once noise rules', () => {
    const found = frameRates(plan, 4000, [4, 1, 0.25], 'each frame').map((one) => one.relative);
    expect(found[1]).toBeLessThan(found[0]!);
    expect(found[2]).toBeLessThan(found[1]!);
    const noisy = frameRates({ ...plan, sigma: 30 }, 64_000, [16, 1], 'each frame');
    expect(noisy[0]!.relative / noisy[1]!.relative).toBeGreaterThan(1.85);
    expect(noisy[0]!.relative / noisy[1]!.relative).toBeLessThan(2.1);
  });

  test('with light spread over the frames, precision levels off: 26 % above its limit at x = 1, 11 % at 4, 7 % at 10', () => {
    // From the closed form of Berglund 2010: Δt(2 + 4√(1 + 2x)) against 4√2 with x = 1/Δt².
    const limit = Math.sqrt((4 * Math.SQRT2) / (2 * 20_000));
    const found = frameRates(plan, 20_000, [1, 0.5, Math.sqrt(0.1)], 'each second');
    [1.256, 1.112, 1.072].forEach((value, i) =>
      expect(Math.abs(found[i]!.relative / limit - value)).toBeLessThan(0.006),
    );
  });

  test('intervals that leave fewer than three frames are left out', () => {
    expect(frameRates(plan, 1, [0.1, 0.5, 1], 'each frame').map((one) => one.frames)).toEqual([11, 3]);
  });
});
