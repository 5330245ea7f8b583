import { Extension } from '@tiptap/core';
import type { Node } from '@tiptap/pm/model';
import { Plugin, type Transaction } from '@tiptap/pm/state';
import { ySyncPluginKey } from '@tiptap/y-tiptap';

/**
 * Gives a diffusion block that was copied an id of its own, in the same step as it is put in. The original keeps its id,
 * wherever the copy stands: values and links that name it must not change their meaning. Only what this person does is
 * looked at; what comes from others was looked at by them.
 */
export const OwnBlockIds = Extension.create({
  name: 'ownBlockIds',

  addProseMirrorPlugins() {
    return [
      new Plugin({
        appendTransaction(transactions, before, after) {
          const own = transactions.filter((one) => one.docChanged && !isFromAfar(one));
          if (own.length === 0) return null;
          const copies = copiesIn(before.doc, after.doc, transactions);
          if (copies.length === 0) return null;
          const change = after.tr;
          for (const at of copies) change.setNodeAttribute(at, 'blockId', crypto.randomUUID());
          return change;
        },
      }),
    ];
  },
});

function isFromAfar(transaction: Transaction): boolean {
  const meta = transaction.getMeta(ySyncPluginKey) as { isChangeOrigin?: boolean } | undefined;
  return meta?.isChangeOrigin === true;
}

/** Places of the blocks that stand in the document with an id that another block has a better claim to, or with none. */
function copiesIn(before: Node, after: Node, transactions: readonly Transaction[]): number[] {
  const now = blocksIn(after);
  const byId = new Map<string, (typeof now)[number][]>();
  for (const one of now) byId.set(one.blockId, [...(byId.get(one.blockId) ?? []), one]);
  if (byId.size === now.length && !byId.has('')) return [];
  const stayed = new Set(blocksIn(before).flatMap((one) => placeAfter(one.at, transactions) ?? []));
  return [...byId].flatMap(([blockId, blocks]) => {
    const original = blockId === '' ? null : (blocks.find((one) => stayed.has(one.at)) ?? blocks[0]);
    return blocks.filter((one) => one !== original).map((one) => one.at);
  });
}

function blocksIn(doc: Node): { at: number; blockId: string }[] {
  const found: { at: number; blockId: string }[] = [];
  doc.descendants((node, at) => {
    if (node.type.name !== 'diffusionBlock') return;
    const blockId: unknown = node.attrs.blockId;
    found.push({ at, blockId: typeof blockId === 'string' ? blockId : '' });
  });
  return found;
}

/** Where a node of the earlier document stands now; null when it was taken out. */
function placeAfter(at: number, transactions: readonly Transaction[]): number | null {
  let place = at;
  for (const { mapping } of transactions) {
    const mapped = mapping.mapResult(place, 1);
    if (mapped.deletedAfter) return null;
    place = mapped.pos;
  }
  return place;
}
