'use client';

import { VegaEmbed } from 'react-vega';
import type { TopLevelSpec } from 'vega-lite';

/** Drawn by Vega's interpreter instead of compiled code, so that the page needs no right to run text as a program. */
const OPTIONS = {
  actions: false,
  renderer: 'svg',
  ast: true,
  mode: 'vega-lite',
  defaultStyle: false,
  tooltip: false,
} as const;

/** The heavy half of a chart; import it lazily (lazy-chart.tsx). `label` is what the chart says, in words. */
export default function VegaChart({ spec, label }: { spec: TopLevelSpec; label: string }) {
  return (
    <VegaEmbed
      spec={spec}
      options={OPTIONS}
      role="img"
      aria-label={label}
      // A sheet of paper may be narrower than the window that the chart was drawn for.
      className="w-full [&_svg]:h-auto [&_svg]:max-w-full"
    />
  );
}
