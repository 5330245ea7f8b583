'use client';

import { Button } from '@/components/ui/button';

export interface RunningUpload {
  readonly id: string;
  readonly name: string;
  readonly percent: number;
  readonly error: string | null;
  readonly stop: () => void;
  readonly forget: () => void;
  readonly again: () => void;
}

/** Uploads on their way, with how far they are, and those that did not arrive, with what to do. */
export function UploadList({ uploads }: { uploads: readonly RunningUpload[] }) {
  if (uploads.length === 0) return null;
  return (
    <ul className="small mt-4 list-none space-y-3" aria-label="Uploads">
      {uploads.map((upload) => (
        <li key={upload.id} className="border-t pt-2">
          <div className="flex flex-wrap items-center justify-between gap-3">
            <span className="break-all">{upload.name}</span>
            {upload.error ? (
              <span className="flex gap-2">
                <Button size="small" onClick={upload.again}>
                  Try again
                </Button>
                <Button size="small" weight="quiet" onClick={upload.forget}>
                  Leave it
                </Button>
              </span>
            ) : (
              <Button size="small" weight="quiet" onClick={upload.stop}>
                Stop
              </Button>
            )}
          </div>
          {upload.error ? (
            <p role="alert" className="mt-1 max-w-measure text-madder">
              {upload.error}
            </p>
          ) : (
            <>
              <progress
                className="mt-1 h-1 w-full accent-malachite"
                max={100}
                value={upload.percent}
                aria-label={`Sending ${upload.name}`}
              />
              <span className="label text-muted">
                {upload.percent < 100 ? `${Math.round(upload.percent)} % sent` : 'checking on the server …'}
              </span>
            </>
          )}
        </li>
      ))}
    </ul>
  );
}
