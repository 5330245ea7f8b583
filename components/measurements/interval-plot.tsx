import { quantityText } from '@/components/ui/format-quantity';
import { verdictColours } from '@/components/ui/verdict-curves';
import type { MeasurementRow } from '@/db/inputs/measurement';
import { placeOn, type IntervalScale } from './interval-scale';

/** The range of D that is asked for; null: that end is open. */
export interface AskedRange {
  readonly from: number | null;
  readonly to: number | null;
}

/** The width that axis and plots share. */
const across = 'absolute left-0 w-full min-[960px]:w-[calc(100%-1.25rem)]';

/**
 * One measurement on the log axis that all rows share: an open circle at D, a line over its 95 % interval, an arrow where
 * the interval goes on beyond the axis. Drawn in percentages of the place it is given, so that nothing is stretched and
 * the hairlines of neighbouring rows meet.
 */
export function IntervalPlot({
  row,
  scale,
  asked,
}: {
  row: MeasurementRow;
  scale: IntervalScale;
  asked: AskedRange;
}) {
  const label = row.d
    ? quantityText({ symbol: 'D', value: row.d.value, lo: row.d.lo, hi: row.d.hi, unit: 'µm²/s' })
    : 'no D to draw';
  return (
    <>
      <svg aria-hidden className={`inset-y-0 h-full ${across}`}>
        <Ground scale={scale} asked={asked} />
      </svg>
      {/* Beside the number where the row is a line of a table, in the middle where it is folded. */}
      <svg
        role="img"
        aria-label={label}
        className={`inset-y-0 h-full overflow-visible min-[960px]:top-3 min-[960px]:h-5 ${across}`}
      >
        {row.d ? <Interval d={row.d} scale={scale} colour={`var(--${verdictColours[row.verdict]})`} /> : null}
      </svg>
    </>
  );
}

function Interval({
  d,
  scale,
  colour,
}: {
  d: NonNullable<MeasurementRow['d']>;
  scale: IntervalScale;
  colour: string;
}) {
  const goesOnLeft = d.lo === null || d.lo < scale.lo;
  const goesOnRight = d.hi === null || d.hi > scale.hi;
  const [left, right, middle] = [
    percent(goesOnLeft ? 0 : placeOn(scale, d.lo ?? 0)),
    percent(goesOnRight ? 1 : placeOn(scale, d.hi ?? 0)),
    percent(placeOn(scale, d.value)),
  ];
  return (
    <g stroke={colour} strokeWidth={1.5} fill="none">
      <line x1={left} x2={right} y1="50%" y2="50%" />
      {goesOnLeft ? <Arrow x={left} towards={-1} /> : <Cap x={left} />}
      {goesOnRight ? <Arrow x={right} towards={1} /> : <Cap x={right} />}
      {d.value > 0 ? <circle cx={middle} cy="50%" r={3.5} fill="var(--page)" /> : null}
    </g>
  );
}

/** A nested drawing has its origin where it stands: paths cannot be given in percentages. */
function Cap({ x }: { x: string }) {
  return (
    <svg x={x} y="50%" overflow="visible">
      <path d="M0-3V3" />
    </svg>
  );
}

function Arrow({ x, towards }: { x: string; towards: -1 | 1 }) {
  return (
    <svg x={x} y="50%" overflow="visible">
      <path d={towards < 0 ? 'M4-3L0 0L4 3' : 'M-4-3L0 0L-4 3'} />
    </svg>
  );
}

/** What lies under the intervals: a hairline at every tick, and the range that is asked for. */
function Ground({ scale, asked }: { scale: IntervalScale; asked: AskedRange }) {
  const hasRange = asked.from !== null || asked.to !== null;
  const from = asked.from === null ? 0 : placeOn(scale, asked.from);
  const to = asked.to === null ? 1 : placeOn(scale, asked.to);
  return (
    <>
      {hasRange ? (
        <rect
          x={percent(from)}
          width={percent(to - from)}
          y="0"
          height="100%"
          fill="var(--malachite)"
          opacity={0.12}
        />
      ) : null}
      {scale.ticks.map(({ value }) => (
        <line
          key={value}
          x1={percent(placeOn(scale, value))}
          x2={percent(placeOn(scale, value))}
          y1="0"
          y2="100%"
          stroke="var(--rule)"
        />
      ))}
    </>
  );
}

/** The axis itself, for the head of the ledger: what it measures, and a number at every tick. */
export function IntervalAxis({ scale }: { scale: IntervalScale }) {
  return (
    <svg aria-hidden className={`inset-y-0 h-full overflow-visible font-sans ${across}`}>
      <text y="1.25rem" className="fill-muted text-label">
        95 % interval, µm²/s
      </text>
      {scale.ticks.map(({ value, label }) => (
        <text
          key={value}
          x={percent(placeOn(scale, value))}
          y="2.5rem"
          textAnchor="middle"
          className="fill-muted text-fine tabular-nums"
        >
          {label}
        </text>
      ))}
    </svg>
  );
}

const percent = (place: number): string => `${(place * 100).toFixed(2)}%`;
