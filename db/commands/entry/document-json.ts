import * as Y from 'yjs';

/** A node of a document as plain JSON, the form that ProseMirror uses; schema-free, so that this folder needs no editor. */
export interface DocumentNode {
  readonly type: string;
  readonly attrs?: Readonly<Record<string, unknown>>;
  readonly content?: readonly DocumentNode[];
  readonly text?: string;
  readonly marks?: readonly { readonly type: string; readonly attrs?: Readonly<Record<string, unknown>> }[];
}

/** Name of the one root fragment of an entry's document (the editor's FRAGMENT). */
export const ROOT = 'default';

/** Builds the shared form of a node. Neighbouring texts become one Y.XmlText with formats, as the editor expects. */
export function toShared(node: DocumentNode): Y.XmlElement {
  const element = new Y.XmlElement(node.type);
  for (const [name, value] of Object.entries(node.attrs ?? {})) {
    // Attributes of any JSON kind; Yjs types them as text only.
    if (value !== null && value !== undefined) element.setAttribute(name, value as string);
  }
  const children: (Y.XmlElement | Y.XmlText)[] = [];
  let text: Y.XmlText | null = null;
  // Counted here: a text that is in no document yet does not know its length.
  let length = 0;
  for (const child of node.content ?? []) {
    if (child.type !== 'text') {
      children.push(toShared(child));
      text = null;
      continue;
    }
    if (!text) {
      children.push((text = new Y.XmlText()));
      length = 0;
    }
    const formats = Object.fromEntries((child.marks ?? []).map((mark) => [mark.type, mark.attrs ?? {}]));
    const words = child.text ?? '';
    text.insert(length, words, formats);
    length += words.length;
  }
  element.insert(0, children);
  return element;
}
