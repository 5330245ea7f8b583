import Link from 'next/link';
import { Place, PlaceHeading } from '@/components/shell/place';
import { buttonClasses } from '@/components/ui/button';

export default function NotFound() {
  return (
    <Place>
      <title>Nothing here · Motebook</title>
      <PlaceHeading title="There is nothing here that you may see" />
      <p className="mt-3 max-w-measure text-text text-muted">
        The address may be mistyped, or what lies there is not shared with you. An owner of the notebook can
        change that.
      </p>
      <Link href="/" className={`${buttonClasses('plain')} mt-6`}>
        Go to Today
      </Link>
    </Place>
  );
}
