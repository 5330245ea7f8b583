'use client';

import { useEditorState, type Editor } from '@tiptap/react';
import { useRef, type KeyboardEvent } from 'react';

interface Tool {
  /** Contains the words on its face, so that it can be called by what is seen (WCAG 2.5.3). */
  readonly name: string;
  readonly face: string;
  readonly className?: string;
  readonly active: (editor: Editor) => boolean;
  readonly run: (editor: Editor) => void;
}

const TOOLS: readonly Tool[] = [
  {
    name: 'Heading',
    face: 'Heading',
    active: (e) => e.isActive('heading', { level: 2 }),
    run: (e) => e.chain().focus().toggleHeading({ level: 2 }).run(),
  },
  {
    name: 'Bold',
    face: 'B',
    className: 'font-bold',
    active: (e) => e.isActive('bold'),
    run: (e) => e.chain().focus().toggleBold().run(),
  },
  {
    name: 'Italic',
    face: 'I',
    className: 'italic font-serif',
    active: (e) => e.isActive('italic'),
    run: (e) => e.chain().focus().toggleItalic().run(),
  },
  {
    name: 'List',
    face: 'List',
    active: (e) => e.isActive('bulletList'),
    run: (e) => e.chain().focus().toggleBulletList().run(),
  },
  {
    name: '1. 2. numbered list',
    face: '1. 2.',
    active: (e) => e.isActive('orderedList'),
    run: (e) => e.chain().focus().toggleOrderedList().run(),
  },
  {
    name: 'Quote',
    face: 'Quote',
    active: (e) => e.isActive('blockquote'),
    run: (e) => e.chain().focus().toggleBlockquote().run(),
  },
  { name: 'Undo', face: 'Undo', active: () => false, run: (e) => e.chain().focus().undo().run() },
  { name: 'Redo', face: 'Redo', active: () => false, run: (e) => e.chain().focus().redo().run() },
];

/** A quiet row of words above the text. One stop for the Tab key; arrows go along it. */
export function Toolbar({ editor }: { editor: Editor }) {
  const row = useRef<HTMLDivElement>(null);
  const active = useEditorState({
    editor,
    selector: ({ editor: now }) => TOOLS.map((tool) => tool.active(now)),
  });
  const move = (event: KeyboardEvent) => {
    const step = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
    if (step === 0) return;
    const buttons = [...(row.current?.querySelectorAll('button') ?? [])];
    const at = buttons.indexOf(document.activeElement as HTMLButtonElement);
    buttons[(at + step + buttons.length) % buttons.length]?.focus();
    event.preventDefault();
  };
  return (
    <div ref={row} role="toolbar" aria-label="Text" className="entry-toolbar" onKeyDown={move}>
      {TOOLS.map((tool, at) => (
        <button
          key={tool.name}
          type="button"
          tabIndex={at === 0 ? 0 : -1}
          aria-label={tool.name}
          aria-pressed={tool.name === 'Undo' || tool.name === 'Redo' ? undefined : active[at]}
          className={tool.className}
          // The selection in the text must survive the click.
          onMouseDown={(event) => event.preventDefault()}
          onClick={() => tool.run(editor)}
        >
          {tool.face}
        </button>
      ))}
    </div>
  );
}
