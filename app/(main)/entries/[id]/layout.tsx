import type { ReactNode } from 'react';
import { loadEntry } from './load-entry';

/** Asks for the right before anything of the page is sent, so that "not found" is also the status of the answer. */
export default async function EntryLayout({
  params,
  children,
}: {
  params: Promise<{ id: string }>;
  children: ReactNode;
}) {
  await loadEntry((await params).id);
  return children;
}
