import { notFound } from 'next/navigation';
import type { ReactNode } from 'react';
import { getCurrentActor } from '@/app/_server/actor';
import { may } from '@/db/policies/may';

/** Asked above what loads: for whom there are no people here, the address answers 404 from the start. */
export default async function PeopleLayout({ children }: { children: ReactNode }) {
  if (!may(await getCurrentActor(), 'people.read', null)) notFound();
  return children;
}
