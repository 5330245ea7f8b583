'use client';

import { useEffect, useRef, useState } from 'react';
import { Collaboration, type CollaborationOptions } from '@/editor/collaboration';

/**
 * The page's connection to an entry: made when the page is there, ended with it. Closing the window while something is
 * unsaved asks first.
 */
export function useCollaboration(options: CollaborationOptions): Collaboration | null {
  const [collaboration, setCollaboration] = useState<Collaboration | null>(null);
  const { wsUrl, entryId, epoch } = options;
  // The newest callbacks, without a new connection whenever a parent is drawn again.
  const callbacks = useRef(options);
  useEffect(() => {
    callbacks.current = options;
  });
  useEffect(() => {
    const made = new Collaboration({
      wsUrl,
      entryId,
      epoch,
      onProjected: (seq) => callbacks.current.onProjected?.(seq),
      onEntryChanged: () => callbacks.current.onEntryChanged?.(),
    });
    setCollaboration(made);
    const ask = (event: BeforeUnloadEvent) => {
      if (made.hasUnsaved) event.preventDefault();
    };
    window.addEventListener('beforeunload', ask);
    return () => {
      window.removeEventListener('beforeunload', ask);
      made.destroy();
      setCollaboration(null);
    };
  }, [wsUrl, entryId, epoch]);
  return collaboration;
}
