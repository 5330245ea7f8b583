import * as decoding from 'lib0/decoding';
import * as encoding from 'lib0/encoding';
import type { WebsocketProvider } from 'y-websocket';
import { FRAME, type Refusal } from './close-codes';

/** What holds for this page at the moment, as the server says. */
export interface ServerState {
  readonly epoch: number;
  readonly lock: number;
  readonly schema: number;
  readonly readOnly: boolean;
  readonly state: string;
}

interface Hello {
  /** Yjs client id; asked at each connection, because it changes when somebody else has it. */
  readonly client: () => number;
  readonly schema: number;
  readonly epoch: number;
}

const SYNC_STEP_1 = 0;
/** `readyState` of a socket that takes frames (WebSockets standard). */
const OPEN = 1;

/**
 * What the product adds below y-websocket's provider (integrity rule C13): hello is the first frame, and others wait until
 * the server has answered it; frames that carry an update are counted, and each waits for its acknowledgement. "Saved" is
 * true only when none waits. Edits made while offline travel in the first answer after the next connection.
 */
export class HelloSocketCore {
  onAck: (frame: number, seq: number) => void = () => undefined;
  onRefused: (frame: number, code: Refusal) => void = () => undefined;
  onState: (state: ServerState) => void = () => undefined;
  onProjected: (seq: number) => void = () => undefined;
  onEntryChanged: () => void = () => undefined;
  /** Called whenever `unacknowledged` may have changed. */
  onChange: () => void = () => undefined;

  private waiting = new Set<number>();
  private refused = 0;
  /** Edits that no frame has carried yet: made offline, or lost with a connection. */
  private unsent = false;
  private answered = false;
  private frame = 0;
  /** The line that counts. One that was given up may report its close long after the next has been opened. */
  private socket: WebSocket | null = null;

  constructor(private readonly hello: Hello) {}

  /** Updates that the server has not acknowledged, as far as this page knows. */
  get unacknowledged(): number {
    return this.waiting.size + this.refused + (this.unsent ? 1 : 0);
  }

  /** A WebSocket class for the provider; `open` makes the real socket. */
  wrap(open: (url: string, protocols?: string | string[]) => WebSocket): typeof WebSocket {
    const connected = (socket: WebSocket) => this.begin(socket);
    const Wrapped = function (url: string, protocols?: string | string[]) {
      return connected(open(url, protocols));
    };
    return Object.assign(Wrapped, {
      CONNECTING: 0,
      OPEN: 1,
      CLOSING: 2,
      CLOSED: 3,
    }) as unknown as typeof WebSocket;
  }

  /** Takes the server's frames from the provider, and watches for edits that are made without a connection. */
  attach(provider: WebsocketProvider): void {
    type Handler = (encoder: encoding.Encoder, decoder: decoding.Decoder) => void;
    const handle = (type: number, handler: Handler) => {
      (provider.messageHandlers as unknown as Record<number, Handler>)[type] = handler;
    };
    handle(FRAME.ack, (_encoder, decoder) =>
      this.acked(decoding.readVarUint(decoder), decoding.readVarUint(decoder)),
    );
    handle(FRAME.refused, (_encoder, decoder) => {
      const frame = decoding.readVarUint(decoder);
      this.wasRefused(frame, decoding.readVarString(decoder) as Refusal);
    });
    handle(FRAME.state, (_encoder, decoder) =>
      this.onState(JSON.parse(decoding.readVarString(decoder)) as ServerState),
    );
    handle(FRAME.projected, (_encoder, decoder) => this.onProjected(decoding.readVarUint(decoder)));
    handle(FRAME.entry, () => this.onEntryChanged());
    provider.doc.on('update', (_update: Uint8Array, origin: unknown) => {
      // A line that is closing takes no frame any more.
      if (origin === provider || (this.answered && this.socket?.readyState === OPEN)) return;
      this.unsent = true;
      this.onChange();
    });
    provider.on('connection-close', () => this.lost());
  }

  private begin(socket: WebSocket): WebSocket {
    this.socket = socket;
    this.answered = false;
    this.frame = 0;
    const held: Uint8Array[] = [];
    const send = socket.send.bind(socket) as (data: Uint8Array) => void;
    socket.addEventListener('open', () => send(this.helloFrame()));
    socket.addEventListener('message', (event: MessageEvent) => {
      if (
        this.answered ||
        this.socket !== socket ||
        !(event.data instanceof ArrayBuffer) ||
        new Uint8Array(event.data)[0] !== FRAME.state
      )
        return;
      this.answered = true;
      for (const data of held.splice(0)) {
        this.count(data);
        send(data);
      }
    });
    socket.send = (data) => {
      const bytes = data as Uint8Array;
      if (!this.answered) {
        held.push(bytes);
        return;
      }
      this.count(bytes);
      send(bytes);
    };
    return socket;
  }

  /** Counts a frame that carries an update. The answer to the server's step 1 carries all that was made offline. */
  private count(bytes: Uint8Array): void {
    const decoder = decoding.createDecoder(bytes);
    if (decoding.readVarUint(decoder) !== FRAME.sync) return;
    const step = decoding.readVarUint(decoder);
    if (step === SYNC_STEP_1) return;
    this.frame += 1;
    this.waiting.add(this.frame);
    if (step === 1) {
      this.unsent = false;
      this.refused = 0;
    }
    this.onChange();
  }

  private acked(frame: number, seq: number): void {
    this.waiting.delete(frame);
    this.onAck(frame, seq);
    this.onChange();
  }

  private wasRefused(frame: number, code: Refusal): void {
    if (this.waiting.delete(frame)) this.refused += 1;
    this.onRefused(frame, code);
    this.onChange();
  }

  /** What was on its way may or may not have arrived: it counts as unsaved until the next connection has shown. */
  private lost(): void {
    if (this.waiting.size > 0 || this.refused > 0) this.unsent = true;
    this.waiting.clear();
    this.refused = 0;
    this.answered = false;
    this.socket = null;
    this.onChange();
  }

  private helloFrame(): Uint8Array {
    const encoder = encoding.createEncoder();
    for (const value of [FRAME.hello, this.hello.client(), this.hello.schema, this.hello.epoch]) {
      encoding.writeVarUint(encoder, value);
    }
    return encoding.toUint8Array(encoder);
  }
}
