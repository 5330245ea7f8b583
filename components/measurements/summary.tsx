import { Button } from '@/components/ui/button';
import type { MeasurementRow, MeasurementSort, MeasurementSummary } from '@/db/inputs/measurement';
import type { FilterChange } from './use-filters';
import { capital, someOfBounded } from './words';

/** How many there are; read aloud when it changes. */
export function SummaryLine({
  summary,
  isWaiting,
}: {
  summary: MeasurementSummary | null;
  isWaiting: boolean;
}) {
  return (
    <p role="status" className="small min-h-6">
      {isWaiting ? (
        <span className="text-muted">Looking …</span>
      ) : summary && summary.total.count > 0 ? (
        capital(someOfBounded(summary.total, 'measurement'))
      ) : summary ? (
        'No measurement'
      ) : null}
    </p>
  );
}

/** Why some results show no D, and why some may be missing. */
export function Remarks({
  summary,
  rows,
  sort,
  onChange,
}: {
  summary: MeasurementSummary | null;
  rows: readonly MeasurementRow[];
  sort: MeasurementSort;
  onChange: (change: FilterChange) => void;
}) {
  const lacking = rows.filter(({ d }) => d === null);
  const hidden = summary?.withoutD?.count ? summary.withoutD : null;
  if (lacking.length === 0 && !hidden) return null;
  return (
    <div className="label mt-6 max-w-measure space-y-2 text-muted">
      {hidden ? (
        <p>
          {capital(someOfBounded(hidden, 'result'))} {hidden.count === 1 && !hidden.more ? 'meets' : 'meet'}{' '}
          the other filters but {hidden.count === 1 && !hidden.more ? 'has' : 'have'} no D to hold against a
          range.{' '}
          <Button weight="quiet" size="small" onClick={() => onChange({ dFrom: null, dTo: null })}>
            Ask for any D
          </Button>
        </p>
      ) : null}
      {lacking.length > 0 ? (
        <p>
          {explain(lacking)}
          {sort === 'd-asc' || sort === 'd-desc'
            ? ' Sorted by D, such results stand last, newest first.'
            : ''}
        </p>
      ) : null}
    </div>
  );
}

function explain(lacking: readonly MeasurementRow[]): string {
  const anomalous = lacking.some(({ verdict }) => verdict === 'anomalous');
  const unresolved = lacking.some(({ verdict }) => verdict !== 'anomalous');
  return [
    anomalous ? 'No single D: the mean squared displacement does not grow in proportion to time.' : '',
    unresolved ? 'No motion resolved: the positions move no more than the localisation error explains.' : '',
  ]
    .filter((sentence) => sentence !== '')
    .join(' ');
}
