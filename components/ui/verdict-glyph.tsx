import type { Verdict } from '@/analysis/types';
import { classes } from './classes';
import { formatNumber } from './format-quantity';
import { VERDICT_AXES, verdictCurves } from './verdict-curves';

const textColours: Record<Verdict, string> = {
  free: 'text-malachite',
  directed: 'text-cobalt',
  confined: 'text-plum',
  anomalous: 'text-ochre',
  undecided: 'text-slate',
};

/** The curve alone, in the colour of the text around it. Always stands beside the word. */
export function VerdictGlyph({ verdict, size = 16 }: { verdict: Verdict; size?: number }) {
  const { curve, reference, dotted, open } = verdictCurves[verdict];
  return (
    <svg
      aria-hidden
      viewBox="0 0 16 16"
      width={size}
      height={size}
      className="inline-block shrink-0 self-center fill-none stroke-current"
      strokeLinecap="round"
      strokeLinejoin="round"
    >
      <path d={VERDICT_AXES} strokeWidth={0.9} opacity={0.6} />
      {reference ? <path d={reference} strokeWidth={0.9} strokeDasharray="0.1 2" opacity={0.85} /> : null}
      <path d={curve} strokeWidth={1.7} {...(dotted ? { strokeDasharray: '0.1 2.8' } : {})} />
      {open ? <circle cx={open[0]} cy={open[1]} r={1.7} strokeWidth={1.2} /> : null}
    </svg>
  );
}

/** A verdict as it is shown everywhere: curve and word, never colour alone. `alpha` is shown with an anomalous one. */
export function VerdictMark({
  verdict,
  alpha = null,
  size = 16,
  className,
}: {
  verdict: Verdict;
  alpha?: number | null;
  size?: number;
  className?: string;
}) {
  return (
    <span
      className={classes(
        'inline-flex items-baseline gap-1.5 whitespace-nowrap',
        textColours[verdict],
        className,
      )}
    >
      <VerdictGlyph verdict={verdict} size={size} />
      <span>
        {verdict}
        {verdict === 'anomalous' && alpha !== null ? (
          <>
            , <i>α</i> = {formatNumber(alpha, 2)}
          </>
        ) : null}
      </span>
    </span>
  );
}
