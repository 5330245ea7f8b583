import { LoadingRows } from '@/components/measurements/list-states';
import { Place } from '@/components/shell/place';
import { MeasurementsHeading } from './_parts/heading';

/** Everything stands where it will stay; only the fields and the rows are still to come. */
export default function Loading() {
  return (
    <Place>
      <MeasurementsHeading />
      <div aria-hidden className="mt-8 h-[17.5rem] border-y tab:h-[15.5rem]" />
      <div className="mt-6">
        <LoadingRows />
      </div>
    </Place>
  );
}
