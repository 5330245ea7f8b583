import { Node, mergeAttributes } from '@tiptap/core';
import { BLOCK_DEFAULTS, type BlockAttributes } from '../../db/inputs/block-settings';

declare module '@tiptap/core' {
  interface Commands<ReturnType> {
    diffusionBlock: {
      /** Puts a diffusion block, with the given readings and settings, after the selection. */
      insertDiffusionBlock: (attributes: Partial<BlockAttributes> & { blockId: string }) => ReturnType;
    };
  }
}

/** The place of a measurement in an entry: ids and settings only. Its numbers come from the server's tables. */
export const DiffusionBlock = Node.create({
  name: 'diffusionBlock',
  group: 'block',
  atom: true,
  draggable: true,
  isolating: true,

  addAttributes() {
    // JSON in one data attribute each, so that copy and paste through HTML keeps types (numbers, lists, null).
    return Object.fromEntries(
      Object.entries(BLOCK_DEFAULTS).map(([name, byDefault]) => [
        name,
        {
          default: byDefault,
          parseHTML: (element: HTMLElement) =>
            parseJson(element.getAttribute(attributeName(name)), byDefault),
          renderHTML: (attributes: Record<string, unknown>) => ({
            [attributeName(name)]: JSON.stringify(attributes[name]),
          }),
        },
      ]),
    );
  },

  parseHTML() {
    return [{ tag: 'figure[data-diffusion-block]' }];
  },

  renderHTML({ HTMLAttributes }) {
    return ['figure', mergeAttributes({ 'data-diffusion-block': '' }, HTMLAttributes)];
  },

  addCommands() {
    return {
      insertDiffusionBlock:
        (attributes) =>
        ({ state, chain }) =>
          // After the selection, with a paragraph behind it: an atom that stays selected would be typed over.
          chain()
            .insertContentAt(state.selection.$to.end() + (state.selection.$to.depth > 0 ? 1 : 0), [
              { type: this.name, attrs: { ...BLOCK_DEFAULTS, ...attributes } },
              { type: 'paragraph' },
            ])
            .run(),
    };
  },
});

function attributeName(name: string): string {
  return `data-${name.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`)}`;
}

function parseJson(text: string | null, byDefault: unknown): unknown {
  if (text === null) return byDefault;
  try {
    return JSON.parse(text) as unknown;
  } catch {
    return byDefault;
  }
}
