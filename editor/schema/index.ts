import { type AnyExtension, getSchema } from '@tiptap/core';
import StarterKit from '@tiptap/starter-kit';
import { DiffusionBlock } from './diffusion-block';

/** Name of the one root fragment of an entry's document; no other is accepted by the server. */
export const FRAGMENT = 'default';

/** Nodes and marks of an entry, in order. DOM-free: the servers use the same list as the page. */
export const schemaExtensions: AnyExtension[] = [
  // Collaboration brings its own undo, which undoes one's own changes only.
  StarterKit.configure({
    undoRedo: false,
    link: { openOnClick: false, protocols: ['http', 'https', 'mailto'] },
  }),
  DiffusionBlock,
];

export const entrySchema = getSchema(schemaExtensions);
