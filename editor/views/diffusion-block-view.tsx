'use client';

import { NodeViewWrapper, type NodeViewProps } from '@tiptap/react';
import { createElement, useCallback, useContext } from 'react';
import { BLOCK_DEFAULTS, readBlock, type BlockAttributes } from '../../db/inputs/block-settings';
import { BlockRenderer } from './block-renderer';

/** Puts a diffusion block on the page: a frame for the editor, its content from above. Broken attributes still show. */
export function DiffusionBlockNodeView({
  node,
  updateAttributes,
  deleteNode,
  selected,
  editor,
}: NodeViewProps) {
  const render = useContext(BlockRenderer);
  const { attributes, faulty } = readBlock(node.attrs);
  const update = useCallback(
    (change: Partial<BlockAttributes>) => updateAttributes(change),
    [updateAttributes],
  );
  const blockId = attributes.blockId || BLOCK_DEFAULTS.blockId;
  return (
    <NodeViewWrapper
      as="div"
      id={blockId ? `block-${blockId}` : undefined}
      className="diffusion-block"
      contentEditable={false}
      data-selected={selected || undefined}
    >
      {render ? (
        // Not as a tag: the linter takes a component from a context for one that is made anew at each drawing.
        createElement(render, {
          attributes,
          faulty,
          update,
          remove: deleteNode,
          selected,
          editable: editor.isEditable,
        })
      ) : (
        <p className="small text-muted">{attributes.caption || 'Diffusion block'}</p>
      )}
    </NodeViewWrapper>
  );
}
