'use client';

import { useEffect, useRef, useState, type ReactNode } from 'react';
import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { IntakeDialog } from './intake-dialog';
import { ManyFiles } from './many-files';
import { UploadList, type RunningUpload } from './upload-list';
import { uploadFile, type UploadedFile } from './upload-file';

/** What came of confirmed readings: one block for each call. */
export interface ConfirmedReadings {
  readonly readingIds: readonly string[];
  readonly name: string;
}

/**
 * Takes files that are dropped anywhere on the page (or chosen with the button), uploads them, and asks how each is to be
 * read. Files that are uploaded stay with the entry even when nobody confirms them.
 */
export function IntakeDropArea({
  entryId,
  editable,
  onReadings,
  children,
}: {
  entryId: string;
  editable: boolean;
  onReadings: (readings: ConfirmedReadings) => void;
  children: ReactNode;
}) {
  const [uploads, setUploads] = useState<readonly RunningUpload[]>([]);
  const [queue, setQueue] = useState<readonly UploadedFile[]>([]);
  const [confirmed, setConfirmed] = useState<readonly { readingId: string; name: string }[]>([]);
  const [total, setTotal] = useState(0);
  const [over, setOver] = useState(false);
  const [notice, setNotice] = useState<string | null>(null);
  const input = useRef<HTMLInputElement>(null);
  const current = queue[0];

  const take = (files: readonly File[]) => {
    if (!editable || files.length === 0) return;
    setNotice(null);
    setTotal((before) =>
      queue.length === 0 && uploads.every((one) => one.error) ? files.length : before + files.length,
    );
    for (const file of files) void send(file);
  };

  const send = async (file: File) => {
    const id = crypto.randomUUID();
    const controller = new AbortController();
    const change = (part: Partial<RunningUpload>) =>
      setUploads((all) => all.map((one) => (one.id === id ? { ...one, ...part } : one)));
    const forget = () => setUploads((all) => all.filter((one) => one.id !== id));
    setUploads((all) => [
      ...all,
      {
        id,
        name: file.name,
        percent: 0,
        error: null,
        stop: () => controller.abort(),
        forget,
        again: () => {
          forget();
          void send(file);
        },
      },
    ]);
    try {
      const done = await uploadFile(file, entryId, (percent) => change({ percent }), controller.signal);
      forget();
      setQueue((all) => [...all, done]);
    } catch (error) {
      if (controller.signal.aborted) forget();
      else change({ error: (error as Error).message });
    }
  };

  // The newest `take` for listeners that are set once.
  const latest = useRef(take);
  useEffect(() => {
    latest.current = take;
  });
  useEffect(() => {
    if (!editable) return;
    const hasFiles = (event: DragEvent) => event.dataTransfer?.types.includes('Files') ?? false;
    const drag = (event: DragEvent) => {
      if (!hasFiles(event)) return;
      event.preventDefault();
      setOver(true);
    };
    const leave = (event: DragEvent) => {
      if (event.relatedTarget === null) setOver(false);
    };
    const drop = (event: DragEvent) => {
      if (!hasFiles(event)) return;
      // Before the editor sees it: a file is never text to be put at the caret.
      event.preventDefault();
      event.stopPropagation();
      setOver(false);
      latest.current([...(event.dataTransfer?.files ?? [])]);
    };
    window.addEventListener('dragover', drag);
    window.addEventListener('dragleave', leave);
    window.addEventListener('drop', drop, true);
    return () => {
      window.removeEventListener('dragover', drag);
      window.removeEventListener('dragleave', leave);
      window.removeEventListener('drop', drop, true);
    };
  }, [editable]);

  const next = (all: readonly { readingId: string; name: string }[]) => {
    const rest = queue.slice(1);
    setQueue(rest);
    if (rest.length > 0 || uploads.some((one) => !one.error)) return setConfirmed(all);
    if (all.length === 1) onReadings({ readingIds: [all[0]!.readingId], name: all[0]!.name });
    setConfirmed(all.length > 1 ? all : []);
  };
  const asksHow = !current && confirmed.length > 1 && uploads.every((one) => one.error);

  return (
    <div className="relative">
      {children}
      {editable ? (
        <div className="mt-4 mb-8 print:hidden">
          <input
            ref={input}
            type="file"
            multiple
            className="sr-only"
            tabIndex={-1}
            aria-label="Trajectory file"
            onChange={({ target }) => {
              take([...(target.files ?? [])]);
              // The same file may be chosen again after a failure.
              target.value = '';
            }}
          />
          <Button onClick={() => input.current?.click()}>Add a trajectory file</Button>
          <span className="label ml-3 text-muted max-tab:hidden">or drop it anywhere on this page</span>
        </div>
      ) : null}
      <UploadList uploads={uploads} />
      {notice ? (
        <Notice className="mt-4" kind="information">
          {notice}
        </Notice>
      ) : null}
      {over ? (
        <div
          aria-hidden
          className="pointer-events-none fixed inset-3 z-40 flex items-center justify-center border-2 border-dashed border-malachite bg-page/80"
        >
          <p className="font-serif text-heading text-malachite">Drop the file to add it to this entry</p>
        </div>
      ) : null}
      {current ? (
        <IntakeDialog
          key={current.attachmentId}
          file={current}
          progress={total > 1 ? `File ${total - queue.length + 1} of ${total}. Check how it was read.` : null}
          onConfirmed={(readingId) => next([...confirmed, { readingId, name: current.name }])}
          onLeave={() => {
            setNotice(`"${current.name}" stays with this entry; no block was made of it.`);
            next(confirmed);
          }}
        />
      ) : null}
      {asksHow ? (
        <ManyFiles
          names={confirmed.map((one) => one.name)}
          onChoose={(together) => {
            if (together)
              onReadings({
                readingIds: confirmed.map((one) => one.readingId),
                name: confirmed.map((one) => one.name).join(', '),
              });
            else for (const one of confirmed) onReadings({ readingIds: [one.readingId], name: one.name });
            setConfirmed([]);
          }}
        />
      ) : null}
    </div>
  );
}
