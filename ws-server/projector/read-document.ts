import { yDocToProsemirrorJSON } from '@tiptap/y-tiptap';
import type * as Y from 'yjs';
import { readBlock, type ReadBlock } from '../../db/inputs/block-settings';
import { projectedName } from '../../db/inputs/block-words';
import { FRAGMENT } from '../../editor/schema/index';

interface JsonNode {
  readonly type?: string;
  readonly text?: unknown;
  readonly attrs?: Record<string, unknown>;
  readonly content?: readonly JsonNode[];
}

/** A diffusion block as it stands in the document. `faulty` names only what a result would rest on. */
export interface DocumentBlock extends ReadBlock {
  readonly blockId: string;
}

export interface ReadDocument {
  /** Words of the entry, one line a block of text. */
  readonly plain: string;
  /** In the order of the text. */
  readonly blocks: readonly DocumentBlock[];
}

/**
 * Words and diffusion blocks of a committed document. Read as plain JSON, without a schema: a reader with a schema would
 * delete from the document what it does not know. So the words of unknown nodes are kept too.
 */
export function readDocument(doc: Y.Doc): ReadDocument {
  const root = yDocToProsemirrorJSON(doc, FRAGMENT) as JsonNode;
  const lines: string[] = [];
  const blocks: DocumentBlock[] = [];
  const times = new Map<string, number>();

  const addBlock = (node: JsonNode) => {
    const block = readBlock(node.attrs ?? {});
    const id = block.attributes.blockId;
    const occurrence = (times.get(id) ?? 0) + 1;
    times.set(id, occurrence);
    blocks.push({
      ...block,
      attributes: { ...block.attributes, caption: storable(block.attributes.caption) },
      blockId: projectedName(id, occurrence),
      // A caption or a name that cannot be used spoils no number.
      faulty: block.faulty.filter((name) => name !== 'caption' && name !== 'blockId'),
    });
    lines.push(block.attributes.caption);
  };
  const visit = (node: JsonNode) => {
    let line = '';
    const endLine = () => {
      lines.push(line);
      line = '';
    };
    for (const child of node.content ?? []) {
      if (typeof child.text === 'string') line += child.text;
      else if (child.type === 'hardBreak') endLine();
      else {
        endLine();
        if (child.type === 'diffusionBlock') addBlock(child);
        else visit(child);
      }
    }
    endLine();
  };
  visit(root);
  const plain = lines.filter((line) => line.trim() !== '').join('\n');
  return { plain: storable(plain), blocks };
}

/** PostgreSQL keeps neither NUL nor half a surrogate pair; anybody's program can write both into a document. */
function storable(text: string): string {
  return text.replaceAll('\0', '').toWellFormed();
}
