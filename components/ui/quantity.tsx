import { classes } from './classes';
import { formatEstimate, formatNumber, THIN_SPACE } from './format-quantity';

/**
 * A measured value as a paper would print it: *D* = 0.431 µm²/s (0.418–0.445). Value and unit never part at a line's end;
 * the interval stays whole too. Both ends null: the value alone, with `digits` significant digits.
 */
export function Quantity({
  symbol,
  value,
  lo = null,
  hi = null,
  unit,
  power,
  digits = 3,
  size = 'running',
  className,
}: {
  symbol?: string;
  value: number;
  lo?: number | null;
  hi?: number | null;
  /** E.g. "µm²/s"; empty for a pure number. */
  unit: string;
  /** An exponent of the unit that is itself a symbol: "α" for µm²/s^α. */
  power?: string;
  /** Significant digits where there is no interval to tell. */
  digits?: number;
  /** "headline": large in Merriweather with its interval small beside it. */
  size?: 'running' | 'headline';
  className?: string;
}) {
  const hasInterval = lo !== null || hi !== null;
  const shown = hasInterval
    ? formatEstimate(value, lo, hi)
    : { value: formatNumber(value, digits), interval: null, scale: '' };
  const headline = size === 'headline';
  return (
    <span className={classes(headline && 'font-serif', className)}>
      <span className={classes('quantity', headline && 'text-headline')}>
        {symbol ? (
          <>
            <span className="symbol">{symbol}</span>
            {' = '}
          </>
        ) : null}
        {shown.value}
        {shown.scale}
        {unit ? THIN_SPACE + unit : null}
        {power ? <sup className="symbol text-[0.65em]">{power}</sup> : null}
      </span>
      {shown.interval === null ? null : (
        <>
          {' '}
          <span className={classes('quantity', headline ? 'small text-muted' : 'text-muted')}>
            ({shown.interval}
            {shown.scale})
          </span>
        </>
      )}
    </span>
  );
}
