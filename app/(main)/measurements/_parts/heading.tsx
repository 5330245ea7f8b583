import { PlaceHeading } from '@/components/shell/place';

export function MeasurementsHeading() {
  return <PlaceHeading title="Measurements" note="Every D of the notebooks that you may read." />;
}
