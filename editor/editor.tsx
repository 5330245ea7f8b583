'use client';

import { EditorContent, useEditor, type Editor } from '@tiptap/react';
import { useEffect, useSyncExternalStore } from 'react';
import type { Collaboration } from './collaboration';
import { pageExtensions } from './extensions';
import { Toolbar } from './toolbar';
import './editor.css';

/**
 * The body of an entry, edited live. The connection is made by whoever mounts this, so that what is saved can be told
 * outside the editor too.
 */
export function EntryEditor({
  collaboration,
  person,
  label,
  placeholder,
  onEditor,
}: {
  collaboration: Collaboration;
  person: { name: string };
  /** Accessible name of the text. */
  label: string;
  placeholder: string;
  onEditor?: (editor: Editor | null) => void;
}) {
  const state = useSyncExternalStore(collaboration.subscribe, collaboration.getState, collaboration.getState);
  const editable = state.loaded && !state.readOnly;
  const editor = useEditor(
    {
      immediatelyRender: false,
      extensions: pageExtensions(collaboration, person, placeholder),
      editable: false,
      editorProps: {
        attributes: { class: 'entry-body', 'aria-label': label, role: 'textbox', 'aria-multiline': 'true' },
      },
    },
    [collaboration],
  );
  useEffect(() => {
    // Before the document has arrived, typing would go nowhere.
    editor?.setEditable(editable, false);
  }, [editor, editable]);
  useEffect(() => {
    onEditor?.(editor);
    return () => onEditor?.(null);
  }, [editor, onEditor]);
  return (
    <div className="entry-editor" data-editable={editable || undefined}>
      {editor && editable ? <Toolbar editor={editor} /> : null}
      <EditorContent editor={editor} />
    </div>
  );
}
