'use client';

import { useRouter } from 'next/navigation';
import { startTransition, useEffect } from 'react';
import { Place, PlaceHeading } from '@/components/shell/place';
import { Button } from '@/components/ui/button';

/** Something failed while this page was made. The frame stays, so that one can go elsewhere. */
export default function PageError({
  error,
  reset,
}: {
  error: Error & { digest?: string };
  reset: () => void;
}) {
  const router = useRouter();
  useEffect(() => console.error(error), [error]);
  return (
    <Place>
      <PlaceHeading title="This page could not be drawn" />
      <p className="mt-3 max-w-measure text-text text-muted">
        Something went wrong on our side. Everything that was marked as saved is safe. Try again; if it
        happens once more, tell your administrator{error.digest ? ` and name this: ${error.digest}` : ''}.
      </p>
      <Button
        className="mt-6"
        onClick={() =>
          startTransition(() => {
            router.refresh();
            reset();
          })
        }
      >
        Try again
      </Button>
    </Place>
  );
}
