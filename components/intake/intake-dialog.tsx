'use client';

import { useState } from 'react';
import type { Inspection, ReadingSpec } from '@/analysis/intake/types';
import type { ReadSummary } from '@/analysis/worker/messages';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { Notice } from '@/components/ui/notice';
import { confirmReading, useIntake } from './intake-query';
import { PathsPreview } from './paths-preview';
import { ProblemsList } from './problems-list';
import { RowsPreview } from './rows-preview';
import { SpecForm } from './spec-form';
import type { UploadedFile } from './upload-file';

/** Shows what was understood of a file, asks for what is missing, and confirms it as a reading. */
export function IntakeDialog({
  file,
  progress,
  onConfirmed,
  onLeave,
}: {
  file: UploadedFile;
  /** "File 2 of 3", when several came at once. */
  progress: string | null;
  onConfirmed: (readingId: string) => void;
  onLeave: () => void;
}) {
  const [corrected, setCorrected] = useState<ReadingSpec | null>(null);
  const [busy, setBusy] = useState(false);
  const [refused, setRefused] = useState<string | null>(null);
  const { data, error, isFetching } = useIntake(file.attachmentId, corrected);
  const inspection = data && !data.inspection.failed ? data.inspection : null;
  const spec = corrected ?? inspection?.spec ?? null;
  const read = data?.read && !data.read.failed ? data.read : null;

  const confirm = async () => {
    if (!spec) return;
    setBusy(true);
    setRefused(null);
    try {
      onConfirmed((await confirmReading(file.attachmentId, spec)).readingId);
    } catch (fault) {
      setRefused((fault as Error).message);
    } finally {
      setBusy(false);
    }
  };

  return (
    <Dialog
      open
      onOpenChange={(open) => {
        if (!open) onLeave();
      }}
      title={file.name}
      description={progress ?? 'Check how the file was read. Closing this keeps the file with the entry.'}
      width="wide"
    >
      {error ? <Notice kind="error">{error.message}</Notice> : null}
      {!data && !error ? (
        <p role="status" className="small text-muted">
          Reading the file …
        </p>
      ) : null}
      {data?.inspection.failed ? (
        <Notice kind="attention" title="This is not a trajectory file that can be read">
          <p>{data.inspection.message}</p>
          <p className="mt-2 text-muted">The file stays with the entry, but no block was made of it.</p>
        </Notice>
      ) : null}
      {inspection && spec ? (
        <Understood inspection={inspection} spec={spec} read={read}>
          <SpecForm inspection={inspection} spec={spec} onChange={setCorrected} />
          {data?.read?.failed ? (
            <Notice kind="attention" title="With these choices nothing can be read">
              {data.read.message}
            </Notice>
          ) : null}
          {read ? (
            <ProblemsList
              attachmentId={file.attachmentId}
              spec={spec}
              problems={read.problems}
              count={read.problemCount}
            />
          ) : null}
        </Understood>
      ) : null}
      {refused ? (
        <Notice kind="error" className="mt-4">
          {refused}
        </Notice>
      ) : null}
      <div className="sticky bottom-0 -mx-6 mt-6 -mb-6 flex flex-wrap items-center justify-end gap-3 border-t bg-page px-6 py-4">
        <Button onClick={onLeave}>{inspection ? 'Not now' : 'Close'}</Button>
        {inspection ? (
          <Button weight="primary" busy={busy || isFetching} disabled={!read} onClick={() => void confirm()}>
            Use this reading
          </Button>
        ) : null}
      </div>
    </Dialog>
  );
}

function Understood({
  inspection,
  spec,
  read,
  children,
}: {
  inspection: Inspection;
  spec: ReadingSpec;
  read: ReadSummary | null;
  children: React.ReactNode;
}) {
  return (
    <div className="space-y-5">
      <p className="max-w-measure">{read ? sentence(read) : missingSentence(inspection)}</p>
      {inspection.notes.length > 0 ? (
        <ul className="small list-none space-y-1 text-muted">
          {inspection.notes.map((note) => (
            <li key={note}>◇ {note}</li>
          ))}
        </ul>
      ) : null}
      <div className="grid gap-6 tab:grid-cols-[1fr_260px]">
        <div className="min-w-0 space-y-5">{children}</div>
        {read ? <PathsPreview paths={read.paths} /> : null}
      </div>
      <div>
        <p className="label text-muted">{describeDialect(spec)}</p>
        <RowsPreview inspection={inspection} columns={spec.columns} />
      </div>
    </div>
  );
}

const count = (n: number, what: string) => `${n.toLocaleString('en')} ${what}${n === 1 ? '' : 's'}`;

function sentence({ summary }: ReadSummary): string {
  const interval =
    summary.frameInterval === null
      ? ''
      : `, ${Number(summary.frameInterval.toPrecision(4))} s from frame to frame`;
  const lengths =
    summary.shortestTrackFrames === summary.longestTrackFrames
      ? `${summary.longestTrackFrames} frames each`
      : `${summary.shortestTrackFrames} to ${summary.longestTrackFrames} frames`;
  const gaps =
    summary.gaps === 0
      ? 'no gaps'
      : `${count(summary.gaps, 'gap')} (${count(summary.missingFrames, 'frame')} missing)`;
  return `${count(summary.tracks, 'track')} of ${lengths} in ${summary.dims}-D${interval}; ${gaps}.`;
}

function missingSentence(inspection: Inspection): string {
  const words = {
    frameInterval: 'the frame interval',
    pixelSize: 'the pixel size',
    lengthUnit: 'the unit of length',
    timeUnit: 'the unit of time',
    exposure: 'the exposure',
  };
  const missing = inspection.required.map((one) => words[one]);
  return missing.length > 1
    ? `The table was found. The file does not say ${missing.slice(0, -1).join(', ')} and ${missing.at(-1)}; please state them.`
    : `The table was found. The file does not say ${missing.join()}; please state it.`;
}

function describeDialect({ dialect }: ReadingSpec): string {
  const names = { ',': 'commas', ';': 'semicolons', '\t': 'tabs', '|': 'bars', ' ': 'spaces' };
  const header =
    dialect.headerLine === null ? 'no column names' : `column names in line ${dialect.headerLine}`;
  return `Separated by ${names[dialect.delimiter]}, decimal ${dialect.decimal === ',' ? 'comma' : 'point'}, ${header}, ${dialect.encoding.toUpperCase()}.`;
}
