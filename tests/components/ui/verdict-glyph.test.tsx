import { renderToStaticMarkup } from 'react-dom/server';
import { describe, expect, test } from 'vitest';
import { VerdictMark } from '@/components/ui/verdict-glyph';
import { verdictColours, verdictCurves } from '@/components/ui/verdict-curves';
import type { Verdict } from '@/analysis/types';

const verdicts = Object.keys(verdictCurves) as Verdict[];

/** Every coordinate pair in path data made of absolute M, L, C and H commands. */
function corners(path: string): [number, number][] {
  const points: [number, number][] = [];
  for (const [, command, rest] of path.matchAll(/([MLCH])([^MLCH]*)/g)) {
    const numbers = (rest ?? '').match(/-?[\d.]+/g)?.map(Number) ?? [];
    if (command === 'H') points.push([numbers[0] as number, (points.at(-1) as [number, number])[1]]);
    else
      for (let i = 0; i < numbers.length; i += 2)
        points.push([numbers[i] as number, numbers[i + 1] as number]);
  }
  return points;
}

test('there are five, and no two are drawn alike', () => {
  expect(verdicts).toHaveLength(5);
  expect(new Set(verdicts.map((verdict) => JSON.stringify(verdictCurves[verdict]))).size).toBe(5);
  expect(new Set(verdicts.map((verdict) => verdictColours[verdict])).size).toBe(5);
});

describe.each(verdicts)('%s', (verdict) => {
  const points = corners(verdictCurves[verdict].curve);

  test('starts at the common origin and stays in the box of 16', () => {
    expect(points[0]).toEqual([2, 14]);
    for (const [x, y] of points) {
      expect(x).toBeGreaterThanOrEqual(1);
      expect(x).toBeLessThanOrEqual(15);
      expect(y).toBeGreaterThanOrEqual(1);
      expect(y).toBeLessThanOrEqual(15);
    }
  });

  test('rises from left to right, as a mean squared displacement does', () => {
    for (let i = 1; i < points.length; i += 1) {
      expect((points[i] as [number, number])[0]).toBeGreaterThanOrEqual(
        (points[i - 1] as [number, number])[0],
      );
      expect((points[i] as [number, number])[1]).toBeLessThanOrEqual((points[i - 1] as [number, number])[1]);
    }
  });

  test('is always shown with its word, and the curve is hidden from screen readers', () => {
    const markup = renderToStaticMarkup(<VerdictMark verdict={verdict} />);
    expect(markup.replace(/<[^>]+>/g, '')).toBe(verdict);
    expect(markup).toMatch(/<svg aria-hidden="true"/);
  });
});

test('an anomalous verdict carries its exponent', () => {
  const markup = renderToStaticMarkup(<VerdictMark verdict="anomalous" alpha={0.618} />);
  expect(markup.replace(/<[^>]+>/g, '')).toBe('anomalous, α = 0.62');
});
