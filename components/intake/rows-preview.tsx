import type { ColumnRoles, Inspection } from '@/analysis/intake/types';
import { classes } from '@/components/ui/classes';

/** The first rows of the file as it is cut into cells; columns that are used are marked with their part. */
export function RowsPreview({ inspection, columns }: { inspection: Inspection; columns: ColumnRoles }) {
  const roleOf = (column: number) =>
    (Object.entries(columns) as [keyof ColumnRoles, number | null][]).find(([, at]) => at === column)?.[0];
  return (
    <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="First rows of the file">
      <table className="label w-full text-right tabular-nums">
        <thead>
          <tr className="border-b">
            {inspection.columns.map((column, at) => (
              <th
                key={at}
                scope="col"
                className={classes('px-3 py-1 font-semibold', roleOf(at) ? 'text-malachite' : 'text-muted')}
              >
                {column.name}
                {column.unit ? ` (${column.unit})` : ''}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {inspection.rows.slice(0, 6).map((row, line) => (
            <tr key={line} className="border-b">
              {inspection.columns.map((_, at) => (
                <td key={at} className={classes('px-3 py-0.5', !roleOf(at) && 'text-muted')}>
                  {row[at] ?? ''}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
