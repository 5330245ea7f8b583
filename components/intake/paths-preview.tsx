import type { PathPreview } from '@/analysis/intake/types';

const SIZE = 260;
const COLOURS = [
  'var(--malachite)',
  'var(--cobalt)',
  'var(--plum)',
  'var(--ochre)',
  'var(--madder)',
  'var(--slate)',
];

/** The paths in the plane, both axes on one scale, with a bar that says how long a micrometre is. */
export function PathsPreview({ paths }: { paths: PathPreview }) {
  const xs = paths.tracks.flatMap((track) => track.x);
  const ys = paths.tracks.flatMap((track) => track.y);
  const left = xs.reduce((a, b) => Math.min(a, b), Infinity);
  const top = ys.reduce((a, b) => Math.min(a, b), Infinity);
  const width = xs.reduce((a, b) => Math.max(a, b), -Infinity) - left;
  const height = ys.reduce((a, b) => Math.max(a, b), -Infinity) - top;
  const span = Math.max(width, height, 1e-9) * 1.08;
  const scale = SIZE / span;
  const x = (value: number) => (value - left - width / 2) * scale + SIZE / 2;
  // Pictures count y downwards; a plane is drawn upwards.
  const y = (value: number) => SIZE / 2 - (value - top - height / 2) * scale;
  const bar = niceLength(span / 4);
  return (
    <figure className="w-full max-w-[260px]">
      <svg
        viewBox={`0 0 ${SIZE} ${SIZE + 22}`}
        className="w-full"
        role="img"
        aria-label={`${paths.shown} of ${paths.of} tracks drawn in a plane of ${span.toPrecision(2)} micrometres.`}
      >
        <rect x={0.5} y={0.5} width={SIZE - 1} height={SIZE - 1} fill="none" stroke="var(--rule)" />
        {paths.tracks.map((track, at) => (
          <polyline
            key={track.id}
            points={track.x
              .map((value, i) => `${x(value).toFixed(1)},${y(track.y[i]!).toFixed(1)}`)
              .join(' ')}
            fill="none"
            stroke={COLOURS[at % COLOURS.length]}
            strokeWidth={1}
            strokeLinejoin="round"
          />
        ))}
        <line x1={0} x2={bar * scale} y1={SIZE + 8} y2={SIZE + 8} stroke="var(--ink)" strokeWidth={2} />
        <text x={bar * scale + 6} y={SIZE + 12} fontSize={11} fill="var(--muted)" fontFamily="var(--sans)">
          {bar} µm
        </text>
      </svg>
      <figcaption className="label text-muted">
        {paths.shown < paths.of
          ? `${paths.shown} of ${paths.of} paths`
          : `${paths.of} ${paths.of === 1 ? 'path' : 'paths'}`}{' '}
        in the plane
      </figcaption>
    </figure>
  );
}

/** The largest of 1, 2, 5 × 10ⁿ that is not longer. */
function niceLength(most: number): number {
  const power = 10 ** Math.floor(Math.log10(most));
  const step = [5, 2, 1].find((one) => one * power <= most) ?? 1;
  return Number((step * power).toPrecision(3));
}
