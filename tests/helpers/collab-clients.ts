import { encode } from 'next-auth/jwt';
import WebSocket from 'ws';
import { WebsocketProvider } from 'y-websocket';
import * as Y from 'yjs';
import { SCHEMA_VERSION } from '../../editor/close-codes';
import type { Actor } from '../../db/policies/may';
import { sessionCookieName } from '../../db/session-cookie';
import { FRAGMENT } from '../../editor/schema/index';
import { HelloSocketCore } from '../../editor/hello-socket';

export const PUBLIC_URL = 'http://127.0.0.1:4999';
export const SECRET = 'a secret for tests only, 32 characters';

/** The cookie that a browser of this person would send. */
export async function cookieFor(actor: Pick<Actor, 'personId' | 'loginId'>): Promise<string> {
  const token = await encode({
    token: { sub: actor.personId, loginId: actor.loginId },
    secret: SECRET,
    maxAge: 3600,
  });
  return `${sessionCookieName(PUBLIC_URL)}=${token}`;
}

/** A raw socket to an entry, for what a well-behaved client would never send. */
export async function rawSocket(
  port: number,
  entryId: string,
  actor: Actor | null,
  origin = PUBLIC_URL,
): Promise<WebSocket> {
  const headers: Record<string, string> = { Origin: origin };
  if (actor) headers.Cookie = await cookieFor(actor);
  const socket = new WebSocket(`ws://127.0.0.1:${port}/${entryId}`, { headers });
  socket.binaryType = 'arraybuffer';
  return socket;
}

export interface TestClient {
  readonly doc: Y.Doc;
  readonly provider: WebsocketProvider;
  /** Numbers of frames that were acknowledged. */
  readonly acked: Set<number>;
  readonly refusals: string[];
  readonly closes: number[];
  /** Updates without an answer. */
  unacknowledged(): number;
  text(): string;
  type(words: string): void;
  destroy(): void;
}

/** A whole client: y-websocket's provider with the product's own hello in front of it. */
export async function makeClient(
  port: number | (() => number),
  entryId: string,
  actor: Actor,
): Promise<TestClient> {
  const cookie = await cookieFor(actor);
  const doc = new Y.Doc();
  const acked = new Set<number>();
  const refusals: string[] = [];
  const closes: number[] = [];
  const core = new HelloSocketCore({ client: () => doc.clientID, schema: SCHEMA_VERSION, epoch: 1 });
  core.onAck = (frame) => acked.add(frame);
  core.onRefused = (_frame, code) => refusals.push(code);
  const portNow = typeof port === 'number' ? () => port : port;
  const Socket = core.wrap((url) => {
    const to = new URL(url);
    to.port = String(portNow());
    return new WebSocket(to, {
      headers: { Origin: PUBLIC_URL, Cookie: cookie },
    }) as unknown as globalThis.WebSocket;
  });
  const provider = new WebsocketProvider(`ws://127.0.0.1:${portNow()}`, entryId, doc, {
    disableBc: true,
    WebSocketPolyfill: Socket,
    maxBackoffTime: 400,
  });
  core.attach(provider);
  provider.on('connection-close', (event) => event && closes.push(event.code));
  return {
    doc,
    provider,
    acked,
    refusals,
    closes,
    unacknowledged: () => core.unacknowledged,
    text: () =>
      doc
        .getXmlFragment(FRAGMENT)
        .toArray()
        .map((node) => (node as Y.XmlElement).toArray().join(''))
        .join('\n'),
    type(words) {
      doc.transact(() => {
        const root = doc.getXmlFragment(FRAGMENT);
        let last = root.get(root.length - 1) as Y.XmlElement | undefined;
        if (!last) root.insert(0, [(last = new Y.XmlElement('paragraph'))]);
        if (!(last.get(last.length - 1) instanceof Y.XmlText)) last.insert(last.length, [new Y.XmlText()]);
        const text = last.get(last.length - 1) as Y.XmlText;
        text.insert(text.length, words);
      });
    },
    destroy() {
      provider.destroy();
      doc.destroy();
    },
  };
}

/** Polls until true. @throws Error after `seconds`, with what was waited for. */
export async function until(
  what: string,
  check: () => boolean | Promise<boolean>,
  seconds = 20,
): Promise<void> {
  const deadline = Date.now() + seconds * 1000;
  while (!(await check())) {
    if (Date.now() > deadline) throw new Error(`waited ${seconds} s in vain: ${what}`);
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}
