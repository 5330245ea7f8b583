import type { AnalysisResult } from '@/analysis/types';
import { formatMoment } from '@/components/ui/format-date';
import type { BlockState } from '@/db/inputs/block-answer';

/** Where the numbers come from: the files with their hashes, the engine, and when it was computed. */
export function Provenance({
  block,
  result,
  timeZone,
}: {
  block: BlockState;
  /** null while there is no current one. */
  result: AnalysisResult | null;
  timeZone: string | null;
}) {
  const when =
    block.computedAt !== null && timeZone !== null
      ? ` on ${formatMoment(new Date(block.computedAt), timeZone)}`
      : '';
  return (
    <div className="label mt-3 space-y-1 text-muted">
      {block.readings.map((reading) => (
        <div key={reading.id} className="flex flex-wrap items-baseline gap-x-3">
          <a
            className="link inline-flex min-h-7 items-center break-all max-desk:min-h-11 pointer-coarse:min-h-11 print:min-h-0!"
            href={`/api/attachments/${reading.attachmentId}`}
            download={reading.name}
          >
            {reading.name}
          </a>
          {reading.problems > 0 ? <span>{reading.problems.toLocaleString('en')} rows not usable</span> : null}
          <Hash sha256={reading.sha256} />
        </div>
      ))}
      {result ? (
        <>
          <p>
            Computed by {result.engine.replace('/', ' ')}
            {when}.
          </p>
          <How result={result} />
        </>
      ) : null}
    </div>
  );
}

/** Where each number of the block is explained. */
function How({ result }: { result: AnalysisResult }) {
  const links = [
    ['/methods#d', 'D and its interval'],
    ['/methods#verdict', 'the verdict'],
    ...(result.confinement ? [['/methods#confinement', 'the size']] : []),
    ...(result.sigma === null ? [] : [['/methods#localisation', 'the localisation error']]),
    ...(result.stokesEinstein ? [['/methods#size', 'size and viscosity']] : []),
    ['/methods#msd', 'the chart'],
  ] as const;
  return (
    <p className="print:hidden">
      How these come about:{' '}
      {links.map(([href, words], at) => (
        <span key={href}>
          {at > 0 ? ', ' : null}
          <a href={href} target="_blank" className="underline underline-offset-4 hover:text-ink">
            {words}
          </a>
        </span>
      ))}
      .
    </p>
  );
}

/** The first 12 digits; all 64 when asked for, and in print, where they can be compared with a file years later. */
function Hash({ sha256 }: { sha256: string }) {
  return (
    <>
      <details className="min-w-0 open:basis-full print:hidden">
        <summary className="inline-flex min-h-7 items-center hover:text-ink max-desk:min-h-11 pointer-coarse:min-h-11">
          SHA-256 {sha256.slice(0, 12)}…
        </summary>
        <code className="block break-all">{sha256}</code>
      </details>
      <span className="hidden basis-full break-all print:block">SHA-256 {sha256}</span>
    </>
  );
}
