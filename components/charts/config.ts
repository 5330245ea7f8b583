import type { Config } from 'vega-lite';
import { fontStacks, variableName, type ColourRole } from '@/components/ui/tokens';

/**
 * A colour of the product by its role, as the page's CSS variable: a chart that is drawn once follows the theme, and paper
 * when it is printed. Whoever needs a picture without the page replaces these by the palette's values.
 */
export const colour = (role: ColourRole): string => `var(${variableName(role)})`;

/** Sizes in pixels. Text is never under 11 px. */
const LABEL = 11;
const TITLE = 12;

/** Measured by the chart before it is drawn, so it must be a real name and not a variable. */
const FONT = fontStacks.sans.map((name) => (name.includes(' ') ? `"${name}"` : name)).join(', ');

/** Vega's expression for a number on an axis: 1500 and 0.002 in full, 2e−5 and 4e6 short. */
export const AXIS_NUMBER =
  "datum.value == 0 || (abs(datum.value) >= 0.001 && abs(datum.value) < 1e5) ? format(datum.value, '~r') : replace(replace(format(datum.value, '~e'), '-', '\u2212'), '+', '')";

/** The same on a logarithmic axis, where only 1, 2 and 5 of each decade are named. */
export const LOG_AXIS_NUMBER = `indexof([1, 2, 5], round(datum.value / pow(10, floor(log(datum.value) / LN10 + 1e-9)))) < 0 ? '' : (${AXIS_NUMBER})`;

/** The one look of all charts: hairline axes, few ticks, no grid, open circles, thin fits with a pale band. */
export const chartConfig: Config = {
  background: 'transparent',
  font: FONT,
  padding: { left: 2, right: 10, top: 8, bottom: 2 },
  view: { stroke: null },
  axis: {
    labelFont: FONT,
    titleFont: FONT,
    labelFontSize: LABEL,
    titleFontSize: TITLE,
    titleFontWeight: 400,
    labelColor: colour('muted'),
    titleColor: colour('ink'),
    domainColor: colour('control'),
    domainWidth: 1,
    tickColor: colour('control'),
    tickSize: 4,
    tickCount: 6,
    grid: false,
    labelPadding: 4,
    titlePadding: 8,
    labelOverlap: 'greedy',
    labelSeparation: 6,
  },
  text: { font: FONT, fontSize: LABEL, color: colour('ink') },
  point: { filled: false, size: 28, strokeWidth: 1.2, opacity: 1 },
  rule: { strokeWidth: 1 },
  line: { strokeWidth: 1.5 },
  area: { opacity: 0.18 },
};
