import { parse, View } from 'vega';
import { compile } from 'vega-lite';
import { describe, expect, test } from 'vitest';
import type { AnalysisResult } from '@/analysis/types';
import { msdRows, msdSummary } from '@/components/charts/msd-rows';
import { msdSpec, type MsdScale } from '@/components/charts/msd-spec';
import { resultOf } from '../diffusion-block/some-results';

const free = resultOf();
const flow = resultOf(undefined, { physics: { velocity: [2, 0] } });
const short = resultOf(undefined, { tracks: 1, frames: 12 });
const long = resultOf(undefined, { tracks: 2, frames: 3000 });

/** Draws as the page does, without a browser. Anything that Vega remarks fails the test. */
async function draw(result: AnalysisResult, scale: MsdScale): Promise<string> {
  const said: string[] = [];
  const say = (...words: unknown[]) => {
    said.push(words.join(' '));
    return logger;
  };
  const logger = { level: () => logger, error: say, warn: say, info: () => logger, debug: () => logger };
  const { spec } = compile({ ...msdSpec(result, scale), width: 700 } as Parameters<typeof compile>[0], {
    logger: logger as never,
  });
  const view = new View(parse(spec), { renderer: 'none', logger: logger as never });
  const svg = await view.toSVG();
  view.finalize();
  expect(said).toEqual([]);
  return svg;
}

/** How many open circles are data; the one in the key is none. */
const points = (svg: string) => svg.match(/aria-roledescription="point"/g)?.length ?? 0;

describe('rows', () => {
  test('are the numbers of the result, with ± 1.96 standard errors cut at zero', () => {
    const msd = free.msd!;
    const rows = msdRows(msd);
    expect(rows.map((row) => row.msd)).toEqual(msd.total);
    expect(rows.map((row) => row.tau)).toEqual(msd.lagSeconds);
    expect(rows.map((row) => row.fit)).toEqual(msd.model);
    expect(rows.map((row) => row.pairs)).toEqual(msd.pairs);
    for (const [i, row] of rows.entries()) {
      expect(row.high - row.msd).toBeCloseTo(1.96 * msd.se[i]!, 12);
      expect(row.low).toBe(Math.max(0, row.msd - 1.96 * msd.se[i]!));
      expect(row.fitLow).toBeLessThanOrEqual(row.fit);
      expect(row.fitHigh).toBeGreaterThanOrEqual(row.fit);
    }
  });

  test('are summed up in words with their first and last value', () => {
    const rows = msdRows(free.msd!);
    const text = msdSummary(free);
    expect(text).toContain(`${rows.length} lag times`);
    expect(text).toContain(`τ = ${Number(rows[0]!.tau.toPrecision(3))}`);
    expect(msdSummary({ ...free, msd: null })).toBe('There are no points to show.');
  });

  test('say when the model leaves the intervals', () => {
    const msd = { ...free.msd!, model: free.msd!.model.map((value) => value * 10) };
    expect(msdSummary({ ...free, msd })).toMatch(/outside the 95 % interval of \d+ of \d+ points/);
  });
});

describe('the drawing', () => {
  test.each([
    ['free', free],
    ['drifting', flow],
    ['one short track', short],
  ])('of a %s result shows every point on both scales, without a remark of Vega', async (_name, result) => {
    for (const scale of ['linear', 'log'] as const) {
      const svg = await draw(result, scale);
      expect(svg).not.toContain('NaN');
      expect(points(svg)).toBe(result.msd!.lag.length);
      expect(svg).toContain('lag time τ (s)');
      expect(svg).toContain('MSD (µm²)');
    }
  });

  test('of a long curve leaves out points that cannot be told apart, never the first or the last', async () => {
    const rows = msdRows(long.msd!);
    expect(rows.length).toBeGreaterThan(80);
    const { data } = msdSpec(long, 'linear') as unknown as { data: { values: { tau: number }[] } };
    expect(data.values).toHaveLength(80);
    expect([data.values[0]!.tau, data.values.at(-1)!.tau]).toEqual([rows[0]!.tau, rows.at(-1)!.tau]);
    expect(points(await draw(long, 'log'))).toBe(80);
  });

  test('on logarithmic axes leaves out what is not above zero and ends intervals within the picture', async () => {
    const msd = {
      ...free.msd!,
      total: free.msd!.total.map((value, i) => (i === 0 ? 0 : value)),
      se: free.msd!.se.map((_, i) => free.msd!.total[i]!),
    };
    const svg = await draw({ ...free, msd }, 'log');
    expect(svg).not.toMatch(/NaN|Infinity/);
    expect(points(svg)).toBe(msd.lag.length - 1);
  });

  test('writes numbers on its axes in full where they are read best so', async () => {
    const axisNumbers = async (factor: number) => {
      const times = (values: readonly number[]) => values.map((value) => value * factor);
      const { total, se, model, modelLo, modelHi, ...rest } = free.msd!;
      const msd = {
        ...rest,
        total: times(total),
        se: times(se),
        model: times(model),
        modelLo: times(modelLo),
        modelHi: times(modelHi),
      };
      const svg = await draw({ ...free, msd }, 'linear');
      return [...svg.matchAll(/<text[^>]*>([^<]*)<\/text>/g)].map(([, text]) => text!);
    };
    const inThousands = await axisNumbers(500);
    expect(inThousands).toContain('1000');
    expect(inThousands.join(' ')).not.toMatch(/\de/);
    expect((await axisNumbers(1e-5)).join(' ')).toMatch(/\de−5/);
  });

  test('takes every colour from the theme and writes nothing smaller than 11 px', async () => {
    const svg = await draw(free, 'linear');
    const colours = new Set([...svg.matchAll(/(?:fill|stroke)="([^"]+)"/g)].map(([, value]) => value!));
    for (const value of colours) expect(value).toMatch(/^(none|transparent|var\(--[a-z-]+\))$/);
    expect(colours).toContain('var(--malachite)');
    const sizes = [...svg.matchAll(/font-size="(\d+(?:\.\d+)?)px"/g)].map(([, size]) => Number(size));
    expect(sizes.length).toBeGreaterThan(5);
    expect(Math.min(...sizes)).toBeGreaterThanOrEqual(11);
  });

  test('of each verdict has the colour of its word', () => {
    const colourOf = (verdict: AnalysisResult['verdict']) =>
      JSON.stringify(msdSpec({ ...free, verdict }, 'linear'));
    expect(colourOf('directed')).toContain('var(--cobalt)');
    expect(colourOf('confined')).toContain('var(--plum)');
    expect(colourOf('anomalous')).toContain('var(--ochre)');
    expect(colourOf('undecided')).toContain('var(--slate)');
  });
});
