import type { TopLevelSpec } from 'vega-lite';
import type { AnalysisResult } from '@/analysis/types';
import { verdictColours } from '@/components/ui/verdict-curves';
import { AXIS_NUMBER, LOG_AXIS_NUMBER, chartConfig, colour } from './config';
import { msdRows, type MsdRow } from './msd-rows';

type Layer = Extract<TopLevelSpec, { layer: unknown }>['layer'][number];

export type MsdScale = 'linear' | 'log';

/** Height of the drawing in pixels; whoever shows it reserves as much. */
export const MSD_HEIGHT_PIXELS = 288;

/** So many points are drawn: more cannot be told apart at a column's width. All of them are in the table. */
const MOST_POINTS = 80;

/** MSD against lag time with the fitted model and its band. @returns a Vega-Lite specification as wide as its container. */
export function msdSpec(result: AnalysisResult, scale: MsdScale): TopLevelSpec {
  const all = result.msd ? msdRows(result.msd) : [];
  const rows = scale === 'log' ? forLogAxis(thin(all)) : thin(all);
  const own = colour(verdictColours[result.verdict]);
  const taus = rows.map((row) => row.tau);
  const squares = rows.flatMap((row) => [row.low, row.high, row.fitHigh]);
  const x = {
    field: 'tau',
    type: 'quantitative' as const,
    title: 'lag time τ (s)',
    scale: scaleOf(scale),
    axis: { labelExpr: axisNumbers(scale, taus) },
  };
  const y = (field: keyof MsdRow) => ({
    field,
    type: 'quantitative' as const,
    title: 'MSD (µm²)',
    scale: scaleOf(scale),
    axis: { labelExpr: axisNumbers(scale, squares) },
  });
  return {
    $schema: 'https://vega.github.io/schema/vega-lite/v6.json',
    width: 'container',
    height: MSD_HEIGHT_PIXELS,
    autosize: { type: 'fit', contains: 'padding' },
    config: chartConfig,
    data: { values: rows },
    layer: [
      {
        name: 'band',
        mark: { type: 'area', color: own },
        encoding: { x, y: y('fitLow'), y2: { field: 'fitHigh' } },
      },
      { name: 'fit', mark: { type: 'line', color: own }, encoding: { x, y: y('fit') } },
      {
        name: 'interval',
        mark: { type: 'rule', color: colour('muted') },
        encoding: { x, y: y('low'), y2: { field: 'high' } },
      },
      { name: 'points', mark: { type: 'point', color: colour('ink') }, encoding: { x, y: y('msd') } },
      ...key(own, scale === 'linear' && levelsOff(rows) ? 'lower right' : 'upper left'),
    ],
  };
}

function scaleOf(scale: MsdScale) {
  return scale === 'log'
    ? { type: 'log' as const, nice: false }
    : { type: 'linear' as const, zero: true, nice: true };
}

/** On a logarithmic axis too short to hold several of 1, 2 and 5, every tick is named. */
function axisNumbers(scale: MsdScale, values: readonly number[]): string {
  const span = Math.max(...values) / Math.min(...values);
  return scale === 'log' && span >= 8 ? LOG_AXIS_NUMBER : AXIS_NUMBER;
}

/** What is zero or less has no place on a logarithmic axis; an interval down to zero ends at a quarter of the least point. */
function forLogAxis(rows: readonly MsdRow[]): MsdRow[] {
  const shown = rows.filter((row) => row.msd > 0 && row.fit > 0);
  const least = Math.min(...shown.map((row) => row.msd)) / 4;
  return shown.map((row) => ({
    ...row,
    low: Math.max(row.low, Math.min(row.msd, least)),
    fitLow: Math.max(row.fitLow, Math.min(row.fit, least)),
  }));
}

/** Whether the fit has most of its height by the middle: then the upper left corner is not free. */
function levelsOff(rows: readonly MsdRow[]): boolean {
  const last = rows.at(-1);
  const middle = last && rows.find((row) => row.tau >= last.tau / 2);
  return middle !== undefined && middle.fit > 0.68 * last!.fit;
}

const KEY_WIDTH_PIXELS = 210;
const KEY_HEIGHT_PIXELS = 42;

/**
 * What is what, in the corner that the curve leaves free: the upper left, for a curve that rises from the origin on either
 * scale; the lower right for one that levels off. Positions in pixels.
 */
function key(own: string, corner: 'upper left' | 'lower right'): Layer[] {
  const down = corner === 'lower right';
  const px = (x: number) => (down ? { value: { expr: `width - ${KEY_WIDTH_PIXELS - x}` } } : { value: x });
  const py = (y: number) => (down ? { value: { expr: `height - ${KEY_HEIGHT_PIXELS - y}` } } : { value: y });
  const at = (x: number, y: number) => ({ x: px(x), y: py(y) });
  const text = (words: string, y: number): Layer => ({
    mark: {
      type: 'text',
      text: words,
      align: 'left',
      baseline: 'middle',
      color: colour('muted'),
      aria: false,
    },
    encoding: at(38, y),
  });
  const layers: Layer[] = [
    {
      mark: { type: 'rule', color: colour('muted'), aria: false },
      encoding: { ...at(20, 3), y2: py(17) },
    },
    { mark: { type: 'point', color: colour('ink'), aria: false }, encoding: at(20, 10) },
    text('measured, with 95 % intervals', 10),
    {
      mark: { type: 'rect', color: own, opacity: chartConfig.area?.opacity as number, aria: false },
      encoding: { ...at(10, 23), x2: px(30), y2: py(33) },
    },
    {
      mark: { type: 'rule', color: own, strokeWidth: 1.5, aria: false },
      encoding: { ...at(10, 28), x2: px(30) },
    },
    text('fit, with its 95 % band', 28),
  ];
  return layers.map((layer) => ({ ...layer, data: { values: [{}] } }));
}

/** Every so many rows, the first and the last among them. */
function thin(rows: readonly MsdRow[]): readonly MsdRow[] {
  if (rows.length <= MOST_POINTS) return rows;
  const step = (rows.length - 1) / (MOST_POINTS - 1);
  return Array.from({ length: MOST_POINTS }, (_, i) => rows[Math.round(i * step)]!);
}
