import { getSchema } from '@tiptap/core';
import { Fragment, type Node, Slice } from '@tiptap/pm/model';
import { EditorState, type Plugin, type Transaction } from '@tiptap/pm/state';
import { ySyncPluginKey } from '@tiptap/y-tiptap';
import { expect, test } from 'vitest';
import { BLOCK_DEFAULTS } from '@/db/inputs/block-settings';
import { OwnBlockIds } from '@/editor/plugins/own-block-ids';
import { schemaExtensions } from '@/editor/schema/index';

const schema = getSchema(schemaExtensions);
const plugins = (OwnBlockIds.config.addProseMirrorPlugins as unknown as (this: unknown) => Plugin[]).call({});
const A = '00000000-0000-4000-8000-00000000000a';
const B = '00000000-0000-4000-8000-00000000000b';

const block = (blockId: unknown, caption = '') =>
  schema.nodes.diffusionBlock!.create({ ...BLOCK_DEFAULTS, blockId, caption });
const words = (text: string) => schema.nodes.paragraph!.create(null, text ? schema.text(text) : null);
const page = (...nodes: Node[]) =>
  EditorState.create({ doc: schema.nodes.doc!.create(null, nodes), plugins });
const blocks = (state: EditorState) => {
  const found: { at: number; blockId: string; caption: string }[] = [];
  state.doc.descendants((node, at) => {
    if (node.type.name === 'diffusionBlock')
      found.push({ at, blockId: node.attrs.blockId, caption: node.attrs.caption });
  });
  return found;
};
const ids = (state: EditorState) => blocks(state).map((one) => one.blockId);
const edit = (state: EditorState, change: (tr: Transaction) => Transaction) => state.apply(change(state.tr));

test('a copy put before its original gets an id of its own; the original keeps its', () => {
  const state = edit(page(words('one'), block(A, 'original')), (tr) => tr.insert(0, block(A, 'copy')));
  const [copy, original] = blocks(state);
  expect(original).toMatchObject({ blockId: A, caption: 'original' });
  expect(copy?.blockId).toMatch(/^[0-9a-f-]{36}$/);
  expect(copy?.blockId).not.toBe(A);
});

test('of several copies each gets its own, also within one paste and inside other blocks', () => {
  const pasted = new Slice(
    Fragment.from([block(A), schema.nodes.blockquote!.create(null, [block(A), block(B)])]),
    0,
    0,
  );
  const state = edit(page(block(A), words('')), (tr) =>
    tr.replace(tr.doc.content.size, tr.doc.content.size, pasted),
  );
  expect(ids(state)[0]).toBe(A);
  expect(new Set(ids(state)).size).toBe(4);
  // The only one with its id has the best claim to it.
  expect(ids(state)[3]).toBe(B);
});

test('moving or cutting and pasting a block is no copy', () => {
  const state = page(block(A, 'moved'), words('one'));
  const moved = edit(state, (tr) => tr.delete(0, 1).insert(tr.doc.content.size, block(A, 'moved')));
  expect(ids(moved)).toEqual([A]);
  const cut = edit(state, (tr) => tr.delete(0, 1));
  expect(ids(edit(cut, (tr) => tr.insert(0, block(A))))).toEqual([A]);
});

test('a block without a usable id gets one', () => {
  for (const id of ['', { a: 1 }]) {
    const state = edit(page(words('one')), (tr) => tr.insert(0, block(id)));
    expect(ids(state)[0]).toMatch(/^[0-9a-f-]{36}$/);
  }
});

test('what others put in is theirs to name; words change nothing', () => {
  const theirs = (tr: Transaction) =>
    tr.insert(0, block(A)).setMeta(ySyncPluginKey, { isChangeOrigin: true });
  expect(ids(edit(page(block(A)), theirs))).toEqual([A, A]);
  const state = page(words('one'), block(A), block(B));
  expect(ids(edit(state, (tr) => tr.insertText('two', 1)))).toEqual([A, B]);
});
