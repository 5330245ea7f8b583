'use client';

import { useState } from 'react';
import type { ReadingSpec, RowProblem } from '@/analysis/intake/types';
import { fetchFile } from '@/components/fetch-json';
import { Button } from '@/components/ui/button';

/** Rows that could not be used, with line and reason; the whole list can be kept as a file. */
export function ProblemsList({
  attachmentId,
  spec,
  problems,
  count,
}: {
  attachmentId: string;
  spec: ReadingSpec;
  problems: readonly RowProblem[];
  count: number;
}) {
  const [error, setError] = useState<string | null>(null);
  if (count === 0) return null;
  const save = async () => {
    setError(null);
    try {
      const url = URL.createObjectURL(
        await fetchFile(`/api/attachments/${attachmentId}/problems`, { body: { spec } }),
      );
      const link = document.createElement('a');
      link.href = url;
      link.download = 'unusable-rows.csv';
      link.click();
      URL.revokeObjectURL(url);
    } catch (fault) {
      setError((fault as Error).message);
    }
  };
  return (
    <details className="label">
      <summary className="inline-flex min-h-7 items-center font-semibold text-ochre max-desk:min-h-11">
        ◇ {count.toLocaleString('en')} {count === 1 ? 'row' : 'rows'} could not be used
      </summary>
      <div
        className="mt-2 max-h-48 overflow-y-auto"
        tabIndex={0}
        role="region"
        aria-label="Rows that could not be used"
      >
        <table className="w-full text-left">
          <thead>
            <tr className="border-b">
              <th scope="col" className="py-1 pr-4">
                Line
              </th>
              <th scope="col" className="pr-4">
                Reason
              </th>
              <th scope="col">Text</th>
            </tr>
          </thead>
          <tbody>
            {problems.slice(0, 100).map((problem) => (
              <tr key={`${problem.line}-${problem.reason}`} className="border-b align-top">
                <td className="py-0.5 pr-4 tabular-nums">{problem.line}</td>
                <td className="pr-4">{problem.reason}</td>
                <td className="break-all text-muted">{problem.text}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <Button weight="quiet" size="small" onClick={() => void save()}>
        Save this list
      </Button>
      {error ? (
        <p role="alert" className="text-madder">
          {error}
        </p>
      ) : null}
    </details>
  );
}
