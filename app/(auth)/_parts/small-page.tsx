import type { ReactNode } from 'react';
import { ProductMark } from '@/components/ui/walk-mark';

/** A page with one question, for people who are not signed in. */
export function SmallPage({ title, children }: { title: string; children: ReactNode }) {
  return (
    <main className="mx-auto max-w-xl px-6 py-12 tab:py-20">
      <ProductMark size={40} className="-ml-2 text-malachite" />
      <h1 className="mt-4 text-title">{title}</h1>
      <div className="mt-6">{children}</div>
    </main>
  );
}
