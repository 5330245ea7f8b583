import Link from 'next/link';
import { buttonClasses } from '@/components/ui/button';
import { ProductMark } from '@/components/ui/walk-mark';

export const metadata = { title: 'Nothing here' };

export default function NotFound() {
  return (
    <main className="mx-auto max-w-page px-6 py-24">
      <ProductMark size={40} className="text-malachite" />
      <h1 className="mt-6 text-title">There is nothing here that you may see</h1>
      <p className="mt-3 max-w-measure text-text text-muted">
        The address may be mistyped, or what lies there is not shared with you. An owner of the notebook can
        change that.
      </p>
      <Link href="/" className={`${buttonClasses('plain')} mt-6`}>
        Go to Today
      </Link>
    </main>
  );
}
