import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { fitWalk, walkPoints } from '@/components/ui/walk';

describe('a walk from hexadecimal digits', () => {
  test('each digit is its high, then its low two bits: right, up, left, down', () => {
    // By hand: 1 = 00 01, right then up; b = 10 11, left then down; back at the start.
    expect(walkPoints('1b')).toEqual([
      [0, 0],
      [1, 0],
      [1, 1],
      [0, 1],
      [0, 0],
    ]);
    expect(walkPoints('1B')).toEqual(walkPoints('1b'));
  });

  test('64 digits of a hash are 128 steps; a UUID is read without its hyphens', () => {
    expect(walkPoints('0f'.repeat(32))).toHaveLength(129);
    expect(walkPoints('00000000-0000-4000-8000-000000000000')).toHaveLength(65);
  });

  test('other characters are refused', () => {
    expect(() => walkPoints('12g4')).toThrow('not hexadecimal: "12g4"');
  });

  const hex = fc.stringMatching(/^[0-9a-f]{1,64}$/);

  test('every step has length one, and the opposite digits walk back', () => {
    fc.assert(
      fc.property(hex, (digits) => {
        const points = walkPoints(digits);
        for (let i = 1; i < points.length; i += 1) {
          const [[x0, y0], [x1, y1]] = [points[i - 1], points[i]] as [[number, number], [number, number]];
          expect(Math.abs(x1 - x0) + Math.abs(y1 - y0)).toBe(1);
        }
        // Turning both directions of every digit round adds binary 1010 to it: the sum of both walks is the origin.
        const opposite = [...digits].map((digit) => (Number.parseInt(digit, 16) ^ 10).toString(16)).join('');
        const [end, turned] = [points.at(-1), walkPoints(opposite).at(-1)] as [
          [number, number],
          [number, number],
        ];
        expect([end[0] + turned[0], end[1] + turned[1]]).toEqual([0, 0]);
      }),
    );
  });

  test('fitted, it touches the margin and stays inside; its path ends where the dot stands', () => {
    fc.assert(
      fc.property(hex, (digits) => {
        const { path, end } = fitWalk(digits, 100, 8);
        const numbers = [...path.matchAll(/[ML](-?[\d.]+) (-?[\d.]+)/g)].map((match) => [
          Number(match[1]),
          Number(match[2]),
        ]);
        expect(numbers.at(-1)).toEqual([...end]);
        const flat = numbers.flat();
        expect(Math.min(...flat)).toBeGreaterThanOrEqual(7.99);
        expect(Math.max(...flat)).toBeLessThanOrEqual(92.01);
        expect(Math.max(...flat) - Math.min(...flat)).toBeGreaterThan(83);
      }),
    );
  });
});
