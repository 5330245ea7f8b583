'use client';

import { useQueryClient } from '@tanstack/react-query';
import type { Editor } from '@tiptap/core';
import { useRouter } from 'next/navigation';
import { useCallback, useRef, useSyncExternalStore, type ReactNode } from 'react';
import { BlocksProvider, blocksKey } from '@/components/diffusion-block/blocks-context';
import { DiffusionBlockView } from '@/components/diffusion-block/diffusion-block';
import { IntakeDropArea, type ConfirmedReadings } from '@/components/intake/intake-drop-area';
import { QueryProvider } from '@/components/query-provider';
import { Notice } from '@/components/ui/notice';
import { endedSentence, refusedSentence, type Collaboration } from '@/editor/collaboration';
import { EntryEditor } from '@/editor/editor';
import { BlockRenderer } from '@/editor/views/block-renderer';
import { PeopleHere } from './people-here';
import { SaveMark } from './save-mark';
import { useCollaboration } from './use-collaboration';

export interface EntryWorkspaceProps {
  readonly entryId: string;
  readonly epoch: number;
  /** Address of the websocket server. */
  readonly wsUrl: string;
  readonly person: { readonly name: string };
  readonly mayWrite: boolean;
  /** The lab's, for the times that blocks show. */
  readonly timeZone: string;
  /** Stands above the text: number, title, day, authors. */
  readonly header: ReactNode;
}

/** An entry at work: the live text with its blocks, who is here, what is saved, and files that are dropped on it. */
export function EntryWorkspace(props: EntryWorkspaceProps) {
  return (
    <QueryProvider>
      <BlocksProvider entryId={props.entryId} timeZone={props.timeZone}>
        <BlockRenderer.Provider value={DiffusionBlockView}>
          <Connected {...props} />
        </BlockRenderer.Provider>
      </BlocksProvider>
    </QueryProvider>
  );
}

function Connected(props: EntryWorkspaceProps) {
  const { entryId, epoch, wsUrl } = props;
  const queries = useQueryClient();
  const router = useRouter();
  const collaboration = useCollaboration({
    wsUrl,
    entryId,
    epoch,
    onProjected: () => void queries.invalidateQueries({ queryKey: blocksKey(entryId) }),
    // Title or date were changed, perhaps by somebody else: the server draws the header.
    onEntryChanged: () => router.refresh(),
  });
  if (!collaboration) {
    return (
      <>
        {props.header}
        <div className="min-h-[60vh]" aria-busy="true" />
      </>
    );
  }
  return <Page {...props} collaboration={collaboration} />;
}

function Page({
  collaboration,
  person,
  mayWrite,
  entryId,
  header,
}: EntryWorkspaceProps & { collaboration: Collaboration }) {
  const state = useSyncExternalStore(collaboration.subscribe, collaboration.getState, collaboration.getState);
  const editor = useRef<Editor | null>(null);
  const keepEditor = useCallback((one: Editor | null) => {
    editor.current = one;
  }, []);
  const editable = mayWrite && state.loaded && !state.readOnly;

  const addBlock = ({ readingIds, name }: ConfirmedReadings) => {
    editor.current?.commands.insertDiffusionBlock({
      blockId: crypto.randomUUID(),
      readingIds: [...readingIds],
      caption: name.replace(/\.(csv|tsv|txt|dat)$/i, '').slice(0, 500),
    });
  };

  return (
    <div className="flex flex-col">
      {header}
      <div className="wide:grid wide:grid-cols-[minmax(0,1fr)_220px] wide:gap-8">
        {/* Times, people and remarks live in the margin; on a narrow page they stand above the text. */}
        <aside
          aria-label="Margin"
          className="sticky top-0 z-10 flex flex-wrap items-center gap-x-6 gap-y-2 border-b bg-page py-2 wide:top-6 wide:order-2 wide:flex-col wide:items-start wide:self-start wide:border-0 wide:py-5 print:hidden"
        >
          <SaveMark phase={state.phase} unsaved={state.unsaved} />
          <PeopleHere people={state.people} />
          {state.loaded && !mayWrite ? <p className="label text-muted">You may read this entry.</p> : null}
        </aside>
        <div className="min-w-0 pt-4 wide:order-1">
          {state.phase === 'refused' ? (
            <Notice kind="attention" title="Your last edit is not saved" className="mb-4">
              {refusedSentence(state.refusal)}
            </Notice>
          ) : null}
          {state.phase === 'ended' ? (
            <Notice kind="attention" title="This page is no longer connected" className="mb-4">
              {endedSentence(state.ended)}
            </Notice>
          ) : null}
          <IntakeDropArea entryId={entryId} editable={editable} onReadings={addBlock}>
            <EntryEditor
              collaboration={collaboration}
              person={person}
              label="Text of this entry"
              placeholder="Write what you did, so that somebody else could repeat it. Drop a trajectory file to measure D."
              onEditor={keepEditor}
            />
          </IntakeDropArea>
        </div>
      </div>
    </div>
  );
}
