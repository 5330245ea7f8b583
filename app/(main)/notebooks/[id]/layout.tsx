import type { ReactNode } from 'react';
import { loadNotebook } from './load-notebook';

/** Asks for the right before anything of the page is sent, so that "not found" is also the status of the answer. */
export default async function NotebookLayout({
  params,
  children,
}: {
  params: Promise<{ id: string }>;
  children: ReactNode;
}) {
  await loadNotebook((await params).id);
  return children;
}
