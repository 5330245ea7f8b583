import { EntryFrame } from '@/components/notebook/entry-frame';
import { Skeleton } from '@/components/ui/skeleton';

export default function Loading() {
  return (
    <EntryFrame>
      <p role="status" className="sr-only">
        The entry is being opened.
      </p>
      <div className="mt-10">
        <Skeleton lines={8} />
      </div>
    </EntryFrame>
  );
}
