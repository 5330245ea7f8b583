import { randomUUID } from 'node:crypto';
import { expect, test } from 'vitest';
import * as Y from 'yjs';
import { toShared, type DocumentNode } from '../../../db/commands/entry/document-json';
import { FRAGMENT } from '../../../editor/schema/index';
import { readDocument } from '../../../ws-server/projector/read-document';
import { block, paragraph } from './world';

function documentOf(...nodes: DocumentNode[]): Y.Doc {
  const doc = new Y.Doc();
  doc.getXmlFragment(FRAGMENT).insert(0, nodes.map(toShared));
  return doc;
}
const text = (words: string) => ({ type: 'text', text: words });

test('one line a block of text, marks and breaks and lists included', () => {
  const doc = documentOf(
    { type: 'heading', attrs: { level: 2 }, content: [text('Beads')] },
    {
      type: 'paragraph',
      content: [
        text('one '),
        { ...text('bold'), marks: [{ type: 'bold' }] },
        { type: 'hardBreak' },
        text('two'),
      ],
    },
    { type: 'bulletList', content: [{ type: 'listItem', content: [paragraph('a'), paragraph('b')] }] },
    { type: 'paragraph' },
  );
  expect(readDocument(doc)).toEqual({ plain: 'Beads\none bold\ntwo\na\nb', blocks: [] });
});

test('what a newer page wrote is kept: words of unknown nodes, blocks inside them, and the document itself', () => {
  const inner = block({ caption: 'within' });
  const doc = documentOf(
    { type: 'cautionNote', attrs: { of: 'laser' }, content: [paragraph('Class 3B'), inner] },
    { type: 'paragraph', content: [text('see '), { type: 'mention', content: [text('page 4')] }] },
  );
  const before = Y.encodeStateAsUpdate(doc);
  const read = readDocument(doc);
  expect(read.plain).toBe('Class 3B\nwithin\nsee \npage 4');
  expect(read.blocks).toMatchObject([{ blockId: inner.attrs.blockId, faulty: [] }]);
  expect(Y.encodeStateAsUpdate(doc)).toEqual(before);
});

test('blocks in order, copies under names of their own, faults by name', () => {
  const id = randomUUID();
  const { blocks } = readDocument(
    documentOf(
      block({ blockId: id }),
      paragraph('between'),
      block({ blockId: id, dims: 7, caption: 7 }),
      block({ blockId: { a: 1 } }),
      { type: 'diffusionBlock' },
    ),
  );
  expect(blocks.map((one) => [one.blockId, one.faulty])).toEqual([
    [id, []],
    [`${id}#2`, ['dims']],
    ['unnamed', []],
    ['unnamed#2', []],
  ]);
});

test('text that the database cannot keep loses only that', () => {
  const doc = documentOf(paragraph('a\0b'), block({ caption: 'half \ud83d of a pair' }));
  const { plain, blocks } = readDocument(doc);
  expect(plain).toBe('ab\nhalf \ufffd of a pair');
  expect(blocks[0]?.attributes.caption).toBe('half \ufffd of a pair');
});
