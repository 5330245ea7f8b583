import type { AnalysisResult } from '@/analysis/types';
import { formatNumber } from '@/components/ui/format-quantity';
import { Quantity } from '@/components/ui/quantity';

/** What D says about the particle or the medium, when enough is stated; each as far as its inputs allow. */
export function SizeLine({ result }: { result: AnalysisResult }) {
  const found = result.stokesEinstein;
  if (!found || (!found.diameter && !found.apparentViscosity && found.expectedD === null)) return null;
  const { diameter, apparentViscosity, expectedD } = found;
  const ratio = expectedD !== null && result.D ? result.D.value / expectedD : null;
  return (
    <p className="small mt-2 text-muted">
      {diameter ? (
        <>
          Apparent diameter <Quantity {...diameter} unit="µm" className="text-ink" />.{' '}
        </>
      ) : null}
      {apparentViscosity ? (
        <>
          Apparent viscosity <Quantity {...apparentViscosity} unit="mPa·s" className="text-ink" />.{' '}
        </>
      ) : null}
      {expectedD !== null ? (
        <>
          Expected <Quantity symbol="D" value={expectedD} unit="µm²/s" className="text-ink" />
          {ratio !== null ? <>; measured / expected = {formatNumber(ratio, 3)}</> : null}.{' '}
        </>
      ) : null}
      For a sphere, by Stokes–Einstein.
    </p>
  );
}
