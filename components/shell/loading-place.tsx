import { Skeleton } from '@/components/ui/skeleton';
import { Place, PlaceHeading } from './place';

/** Stands where a place is about to be, with its heading where it will stay. */
export function LoadingPlace({ title, words, lines = 6 }: { title: string; words: string; lines?: number }) {
  return (
    <Place>
      <PlaceHeading title={title} note="&nbsp;" />
      <p role="status" className="sr-only">
        {words}
      </p>
      <div className="mt-10 border-t pt-4">
        <Skeleton lines={lines} />
      </div>
    </Place>
  );
}
