import type { ReactNode } from 'react';
import type { AnalysisResult, Confinement } from '@/analysis/types';
import { formatNumber } from '@/components/ui/format-quantity';
import { Quantity } from '@/components/ui/quantity';

/** The numbers that belong to the verdict beside D: a size, a velocity, an exponent, or what is excluded. */
export function RegimeLine({ result }: { result: AnalysisResult }) {
  const parts = [
    confinedPart(result),
    powerPart(result),
    ownPart(result),
    driftPart(result),
    excludedPart(result),
  ];
  const shown = parts.filter((part) => part !== null);
  if (shown.length === 0) return null;
  return (
    <p className="small mt-2 text-muted">
      {shown.map((part, i) => (
        <span key={i}>{part} </span>
      ))}
    </p>
  );
}

const BOUNDARIES: Readonly<Record<Confinement['boundary'], string>> = {
  walls: 'positions fill it as between walls',
  well: 'positions gather in the middle, as in a harmonic well',
  unclear: 'walls and a harmonic well cannot be told apart, so the intervals span both',
};

function confinedPart({ confinement, settings }: AnalysisResult): ReactNode {
  if (!confinement) return null;
  const [name, size] =
    settings.geometry === 'circle'
      ? (['Radius of the circle', confinement.circleRadius] as const)
      : settings.geometry === 'sphere'
        ? (['Radius of the sphere', confinement.sphereRadius] as const)
        : (['Width of the box', confinement.width] as const);
  return (
    <>
      {name} <Quantity {...size} unit="µm" className="text-ink" />; {BOUNDARIES[confinement.boundary]}.
    </>
  );
}

function powerPart({ verdict, alpha }: AnalysisResult): ReactNode {
  if (verdict !== 'anomalous' || !alpha) return null;
  return (
    <>
      Exponent <Quantity symbol="α" {...alpha} unit="" className="text-ink" />; MSD = 2·dimensions·
      <i className="font-serif">Kτ</i>
      <sup className="symbol">α</sup>.
    </>
  );
}

function ownPart({ individualSpeed }: AnalysisResult): ReactNode {
  if (!individualSpeed) return null;
  return (
    <>
      Speed of the tracks <Quantity {...individualSpeed} unit="µm/s" className="text-ink" />, root mean
      square.
    </>
  );
}

function driftPart({ drift, verdict }: AnalysisResult): ReactNode {
  if (!drift || !(drift.significant || drift.removed) || verdict === 'anomalous') return null;
  const components = drift.velocity.map((v) => formatNumber(v, 2)).join(', ');
  const error = Math.max(...drift.se);
  return (
    <>
      Common velocity <Quantity symbol="v" value={drift.speed} digits={2} unit="µm/s" className="text-ink" />{' '}
      along ({components}) µm/s, each ± {formatNumber(error, 1)}.
    </>
  );
}

function excludedPart({ verdict, excludedWidth }: AnalysisResult): ReactNode {
  if (excludedWidth === null || verdict === 'confined' || verdict === 'anomalous') return null;
  return (
    <>
      Confinement in a box narrower than{' '}
      <Quantity value={excludedWidth} digits={2} unit="µm" className="text-ink" /> is excluded.
    </>
  );
}
