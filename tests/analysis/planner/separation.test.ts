import { describe, expect, test } from 'vitest';
import { bestResidence, separation, shareCrossed } from '../../../analysis/planner/separation';

/** Finite differences in volumes between reflecting walls, Crank–Nicolson in time: shares nothing with the series. */
function byDifferences(D: number, width: number, time: number, stream: number): number {
  const cells = 400;
  const h = width / cells;
  const steps = 2000;
  const r = (D * time) / steps / (h * h) / 2;
  let c = Float64Array.from({ length: cells }, (_, i) => (i < stream * cells ? 1 : 0));
  const diagonal = (i: number) => 1 + r * (i === 0 || i === cells - 1 ? 1 : 2);
  for (let step = 0; step < steps; step++) {
    const right = c.map((value, i) => {
      const left = i > 0 ? c[i - 1]! : value;
      const next = i < cells - 1 ? c[i + 1]! : value;
      return value + r * (left - 2 * value + next);
    });
    // Thomas' algorithm for −r, diagonal, −r.
    const upper = new Float64Array(cells);
    const solved = new Float64Array(cells);
    for (let i = 0; i < cells; i++) {
      const pivot = diagonal(i) + (i > 0 ? r * upper[i - 1]! : 0);
      upper[i] = -r / pivot;
      solved[i] = (right[i]! + (i > 0 ? r * solved[i - 1]! : 0)) / pivot;
    }
    for (let i = cells - 2; i >= 0; i--) solved[i]! -= upper[i]! * solved[i + 1]!;
    c = solved;
  }
  let crossed = 0;
  for (let i = Math.round(stream * cells); i < cells; i++) crossed += c[i]!;
  return crossed / (stream * cells);
}

describe('two streams side by side (Crank, The Mathematics of Diffusion)', () => {
  test.each([
    { D: 100, width: 100, time: 1, stream: 0.5 },
    { D: 100, width: 100, time: 10, stream: 0.5 },
    { D: 100, width: 100, time: 40, stream: 0.5 },
    { D: 400, width: 200, time: 8, stream: 0.25 },
    { D: 400, width: 200, time: 30, stream: 0.75 },
  ])('$stream of $width µm after $time s agrees with a finite-difference solution', (one) => {
    const series = shareCrossed(one.D, one);
    expect(Math.abs(series / byDifferences(one.D, one.width, one.time, one.stream) - 1)).toBeLessThan(1e-3);
  });

  test('begins as two half spaces, √(Dt/π) a unit of face, and ends evenly spread', () => {
    expect(shareCrossed(100, { width: 100, time: 0 })).toBe(0);
    expect(shareCrossed(0, { width: 100, time: 5 })).toBe(0);
    expect(shareCrossed(100, { width: 100, time: 0.1 })).toBeCloseTo(Math.sqrt(10 / Math.PI) / 50, 12);
    expect(shareCrossed(100, { width: 100, time: 1e4 })).toBeCloseTo(0.5, 12);
    expect(shareCrossed(100, { width: 100, time: 1e4, stream: 0.2 })).toBeCloseTo(0.8, 12);
    // Where one form takes over from the other they agree.
    for (const stream of [0.5, 0.3, 0.8]) {
      const s = Math.min(stream, 1 - stream) ** 2 / 40;
      expect(shareCrossed(1, { width: 1, time: s * 0.999999, stream })).toBeCloseTo(
        shareCrossed(1, { width: 1, time: s * 1.000001, stream }),
        6,
      );
    }
  });

  test('a short stay enriches by the root of the ratio of D, a long one not at all', () => {
    const early = separation(400, 100, { width: 1000, time: 1 });
    expect(early.enrichment).toBeCloseTo(2, 10);
    expect(early.purity).toBeCloseTo(2 / 3, 10);
    expect(separation(400, 100, { width: 10, time: 100 }).enrichment).toBeCloseTo(1, 10);
  });

  test('the best stay is better than any near it', () => {
    const channel = { width: 200 };
    const best = bestResidence(500, 20, channel);
    const gain = (time: number) =>
      shareCrossed(500, { ...channel, time }) - shareCrossed(20, { ...channel, time });
    for (const factor of [0.1, 0.5, 0.9, 1.1, 2, 10]) expect(gain(best)).toBeGreaterThan(gain(best * factor));
    expect(() => bestResidence(1, 2, channel)).toThrow('faster');
    expect(() => shareCrossed(1, { width: 1, time: 1, stream: 1 })).toThrow('stream');
  });
});
