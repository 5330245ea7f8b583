import { yDocToProsemirrorJSON } from '@tiptap/y-tiptap';
import type * as Y from 'yjs';
import { readBlock, type ReadBlock } from '../../db/inputs/block-settings';
import { FRAGMENT } from '../../editor/schema/index';

interface JsonNode {
  readonly type?: string;
  readonly text?: string;
  readonly attrs?: Record<string, unknown>;
  readonly content?: readonly JsonNode[];
}

export interface ReadDocument {
  /** Words of the entry, one line a block. */
  readonly plain: string;
  readonly blocks: readonly (ReadBlock & { readonly blockId: string })[];
}

/**
 * Words and diffusion blocks of a committed document. Read as plain JSON, without a schema: a reader with a schema would
 * delete from the document what it does not know.
 */
export function readDocument(doc: Y.Doc): ReadDocument {
  const root = yDocToProsemirrorJSON(doc, FRAGMENT) as JsonNode;
  const lines: string[] = [];
  const blocks: (ReadBlock & { blockId: string })[] = [];
  const seen = new Map<string, number>();
  const visit = (node: JsonNode) => {
    if (node.type === 'diffusionBlock') {
      const block = readBlock(node.attrs ?? {});
      // A block that was copied keeps its id; both stay visible, the later ones under a name of their own.
      const id = block.attributes.blockId || 'unnamed';
      const times = (seen.get(id) ?? 0) + 1;
      seen.set(id, times);
      blocks.push({ ...block, blockId: times === 1 ? id : `${id}#${times}` });
      if (block.attributes.caption) lines.push(block.attributes.caption);
      return;
    }
    const inline = (node.content ?? []).some((child) => child.type === 'text');
    if (inline) lines.push((node.content ?? []).map((child) => child.text ?? '').join(''));
    else for (const child of node.content ?? []) visit(child);
  };
  visit(root);
  return { plain: lines.filter((line) => line.trim() !== '').join('\n'), blocks };
}
