'use client';

import type { AnyExtension } from '@tiptap/core';
import { ReactNodeViewRenderer } from '@tiptap/react';
import Collaborate from '@tiptap/extension-collaboration';
import CollaborationCaret from '@tiptap/extension-collaboration-caret';
import { Placeholder } from '@tiptap/extensions';
import type { Collaboration } from './collaboration';
import { OwnBlockIds } from './plugins/own-block-ids';
import { DiffusionBlock } from './schema/diffusion-block';
import { FRAGMENT, schemaExtensions } from './schema/index';
import { DiffusionBlockNodeView } from './views/diffusion-block-view';

/** The editor's extensions on a page: the shared schema with its views, live editing, carets with names. */
export function pageExtensions(
  collaboration: Collaboration,
  person: { name: string },
  placeholder: string,
): AnyExtension[] {
  const withViews = schemaExtensions.map((extension) =>
    extension === DiffusionBlock
      ? DiffusionBlock.extend({
          addNodeView() {
            return ReactNodeViewRenderer(DiffusionBlockNodeView, {
              // Fields inside a block are its own: the editor must not take their keys, clicks and pastes for edits.
              stopEvent: ({ event }) => {
                const inside =
                  event.target instanceof Element && event.target.closest('.diffusion-block') !== null;
                return inside && !event.type.startsWith('drag') && event.type !== 'drop';
              },
            });
          },
        })
      : extension,
  );
  return [
    ...withViews,
    OwnBlockIds,
    Placeholder.configure({ placeholder }),
    Collaborate.configure({ document: collaboration.doc, field: FRAGMENT }),
    CollaborationCaret.configure({
      provider: collaboration.provider,
      // The server puts the account's name and colour in place of these.
      user: { name: person.name, color: '#56625c' },
    }),
  ];
}
