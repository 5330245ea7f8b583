import * as Y from 'yjs';
import { SCHEMA_VERSION, type Refusal } from '../../editor/close-codes';
import {
  ackFrame,
  awarenessFrame,
  decodeFrame,
  refusedFrame,
  stateFrame,
  step1Frame,
  step2Frame,
  updateFrame,
  type EntryState,
  type Incoming,
} from '../../ws-server/frames';

/** A socket in memory that behaves as a browser's: listeners first, then the `on…` property that was set later. */
export class PageSocket extends EventTarget {
  readonly OPEN = 1;
  readyState = 0;
  binaryType = 'arraybuffer';
  onopen: ((event: Event) => void) | null = null;
  onmessage: ((event: Event) => void) | null = null;
  onclose: ((event: Event) => void) | null = null;
  onerror: ((event: Event) => void) | null = null;
  /** Everything the page has sent, decoded as the server would. */
  readonly received: Incoming[] = [];
  /** What is left of a close that the page asked for: the other side has not answered yet. */
  closing = false;

  constructor(private readonly server: ScriptedServer) {
    super();
    for (const name of ['open', 'message', 'close', 'error'] as const)
      this.addEventListener(name, (event) => this[`on${name}`]?.(event));
  }

  send(data: Uint8Array): void {
    if (this.readyState !== 1) throw new Error('the socket is not open');
    const frame = decodeFrame(data);
    this.received.push(frame);
    this.server.took(this, frame);
  }

  close(): void {
    if (this.readyState >= 2) return;
    this.readyState = 2;
    this.closing = true;
  }

  open(): void {
    this.readyState = 1;
    this.dispatchEvent(new Event('open'));
  }

  say(frame: Uint8Array): void {
    if (this.readyState !== 1) return;
    this.dispatchEvent(new MessageEvent('message', { data: frame.slice().buffer }));
  }

  /** The line is gone, as the page hears of it. */
  end(code = 1006): void {
    if (this.readyState === 3) return;
    this.readyState = 3;
    this.dispatchEvent(Object.assign(new Event('close'), { code, reason: '' }));
  }

  /** Updates that arrived, in order. */
  updates(): Uint8Array[] {
    return this.received.flatMap((one) => (one.kind === 'update' ? [one.payload] : []));
  }
}

/** The server's side of the protocol, that answers only what a test lets it answer. */
export class ScriptedServer {
  readonly sockets: PageSocket[] = [];
  readonly doc = new Y.Doc();
  state: EntryState = { epoch: 1, lock: 0, schema: SCHEMA_VERSION, readOnly: false, state: 'draft' };
  /** Whether hello is answered, and whether each update is taken and acknowledged, without being told. */
  answersHello = true;
  acknowledges = true;
  /** Whether a new socket can be opened at all. */
  reachable = true;
  private seq = 0;

  readonly openSocket = (): WebSocket => {
    const socket = new PageSocket(this);
    this.sockets.push(socket);
    queueMicrotask(() => (this.reachable ? socket.open() : socket.end()));
    return socket as unknown as WebSocket;
  };

  get last(): PageSocket {
    const socket = this.sockets.at(-1);
    if (!socket) throw new Error('no socket was opened');
    return socket;
  }

  took(socket: PageSocket, frame: Incoming): void {
    if (frame.kind === 'hello' && this.answersHello) this.answerHello(socket);
    if (frame.kind === 'step1') socket.say(step2Frame(Y.encodeStateAsUpdate(this.doc, frame.stateVector)));
    if (frame.kind === 'update' && this.acknowledges) this.acknowledge(socket, socket.updates().length);
  }

  answerHello(socket = this.last): void {
    socket.say(stateFrame(this.state));
    socket.say(step1Frame(Y.encodeStateVector(this.doc)));
  }

  /** Takes an update, by its number on this socket, and says that it is stored. */
  acknowledge(socket: PageSocket, number: number): void {
    Y.applyUpdate(this.doc, socket.updates()[number - 1]!);
    socket.say(ackFrame(number, (this.seq += 1)));
  }

  refuse(socket: PageSocket, number: number, code: Refusal): void {
    socket.say(refusedFrame(number, code));
    if (code === 'gap') socket.say(step1Frame(Y.encodeStateVector(this.doc)));
  }

  /** Somebody else's edit arrives. */
  tell(update: Uint8Array): void {
    Y.applyUpdate(this.doc, update);
    this.last.say(updateFrame(update));
  }

  present(payload: Uint8Array): void {
    this.last.say(awarenessFrame(payload));
  }

  text(): string {
    return this.doc.getText('default').toString();
  }
}
