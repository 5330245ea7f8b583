import WebSocket from 'ws';
import * as Y from 'yjs';
import type { Actor } from '../../db/policies/may';
import { Collaboration } from '../../editor/collaboration';
import { FRAGMENT } from '../../editor/schema/index';
import { cookieFor, PUBLIC_URL } from './collab-clients';

/** All words of an entry's document, paragraph by paragraph. */
export function wordsOf(doc: Y.Doc): string {
  return doc
    .getXmlFragment(FRAGMENT)
    .toArray()
    .map((node) => (node instanceof Y.XmlElement ? node.toArray().join('') : ''))
    .join('\n');
}

/**
 * Somebody who types with the page's own code, and remembers which words the page has called saved. Each word is unlike
 * every other, so that a lost or a doubled one is seen.
 */
export class Typist {
  readonly page: Collaboration;
  readonly typed: string[] = [];
  /** Words that the page has shown as saved at some moment. */
  readonly saved = new Set<string>();
  /** Every state that the page has shown, in order. */
  readonly phases: string[] = [];

  private constructor(
    readonly name: string,
    port: number,
    entryId: string,
    cookie: string,
  ) {
    this.page = new Collaboration({
      wsUrl: `ws://127.0.0.1:${port}`,
      entryId,
      epoch: 1,
      openSocket: (url) =>
        new WebSocket(url, {
          headers: { Origin: PUBLIC_URL, Cookie: cookie },
        }) as unknown as globalThis.WebSocket,
    });
    this.page.subscribe(() => this.look());
    this.look();
  }

  static async open(name: string, port: number, entryId: string, actor: Actor): Promise<Typist> {
    return new Typist(name, port, entryId, await cookieFor(actor));
  }

  get phase(): string {
    return this.page.getState().phase;
  }

  /** Types `count` words at the end of the text. */
  type(count = 1): void {
    for (let i = 0; i < count; i++) {
      const word = `<${this.name}${this.typed.length}>`;
      // Noted first: once the page is told, it may say "saved" at any moment, but never of a word that is not noted.
      this.typed.push(word);
      this.page.doc.transact(() => {
        const paragraph = this.page.doc.getXmlFragment(FRAGMENT).get(0) as Y.XmlElement;
        if (paragraph.length === 0) paragraph.insert(0, [new Y.XmlText()]);
        const text = paragraph.get(paragraph.length - 1) as Y.XmlText;
        text.insert(text.length, word);
      });
    }
  }

  text(): string {
    return wordsOf(this.page.doc);
  }

  close(): void {
    this.page.destroy();
  }

  private look(): void {
    const { phase } = this.page.getState();
    if (phase !== this.phases.at(-1)) this.phases.push(phase);
    if (phase === 'saved') for (const word of this.typed) this.saved.add(word);
  }
}
