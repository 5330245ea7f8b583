import * as encoding from 'lib0/encoding';
import { beforeEach, expect, test } from 'vitest';
import { WebsocketProvider } from 'y-websocket';
import * as Y from 'yjs';
import { FRAME } from '@/editor/close-codes';
import { HelloSocketCore } from '@/editor/hello-socket';
import { step1Frame, step2Frame, updateFrame } from '@/ws-server/frames';
import { type PageSocket, ScriptedServer } from '../helpers/scripted-server';

/** The layer below the provider, frame by frame (integrity rule C13). */
let server: ScriptedServer;
let core: HelloSocketCore;
let client = 11;
let socket: PageSocket;

const empty = Y.encodeStateAsUpdate(new Y.Doc());
const kinds = () => socket.received.map((one) => one.kind);

beforeEach(async () => {
  server = new ScriptedServer();
  server.answersHello = false;
  server.acknowledges = false;
  client = 11;
  core = new HelloSocketCore({ client: () => client, schema: 4, epoch: 2 });
  const Socket = core.wrap(server.openSocket);
  socket = new Socket('ws://127.0.0.1:1/e1') as unknown as PageSocket;
  await Promise.resolve();
});

test('the wrapped class knows the names of the states, as the provider asks for them', () => {
  const Socket = core.wrap(server.openSocket);
  expect([Socket.CONNECTING, Socket.OPEN, Socket.CLOSING, Socket.CLOSED]).toEqual([0, 1, 2, 3]);
});

test('hello goes first and alone; what was said meanwhile follows in its order once the server has answered', () => {
  expect(socket.received).toEqual([{ kind: 'hello', client: 11, schema: 4, epoch: 2 }]);
  socket.send(step1Frame(Y.encodeStateVector(new Y.Doc())));
  socket.send(updateFrame(empty));
  expect(kinds()).toEqual(['hello']);
  expect(core.unacknowledged).toBe(0);
  server.answerHello(socket);
  expect(kinds()).toEqual(['hello', 'step1', 'update']);
  expect(core.unacknowledged).toBe(1);
});

test('only frames that carry an update are counted, steps 2 and updates alike', () => {
  server.answerHello(socket);
  socket.send(step1Frame(Y.encodeStateVector(new Y.Doc())));
  const awareness = encoding.createEncoder();
  encoding.writeVarUint(awareness, FRAME.awareness);
  encoding.writeVarUint8Array(awareness, new Uint8Array([0]));
  socket.send(encoding.toUint8Array(awareness));
  expect(core.unacknowledged).toBe(0);
  socket.send(step2Frame(empty));
  socket.send(updateFrame(empty));
  socket.send(updateFrame(empty));
  expect(core.unacknowledged).toBe(3);
});

test('the client id is asked anew for each line', async () => {
  client = 12;
  const Socket = core.wrap(server.openSocket);
  const second = new Socket('ws://127.0.0.1:1/e1') as unknown as PageSocket;
  await Promise.resolve();
  expect(second.received).toEqual([{ kind: 'hello', client: 12, schema: 4, epoch: 2 }]);
});

test('acknowledgements may come in any order, twice, or for a frame that nobody sent, and count once each', () => {
  const provider = new WebsocketProvider('ws://127.0.0.1:1', 'e1', new Y.Doc(), {
    connect: false,
    WebSocketPolyfill: core.wrap(server.openSocket),
  });
  core.attach(provider);
  const acked: number[] = [];
  core.onAck = (frame) => acked.push(frame);
  server.answerHello(socket);
  for (let i = 0; i < 3; i++) socket.send(updateFrame(empty));
  const handlers = provider.messageHandlers as unknown as Record<
    number,
    (encoder: unknown, decoder: { arr: Uint8Array; pos: number }) => void
  >;
  const ack = (frame: number) =>
    handlers[FRAME.ack]!(encoding.createEncoder(), { arr: new Uint8Array([frame, 9]), pos: 0 });
  ack(3);
  ack(3);
  ack(99);
  expect(core.unacknowledged).toBe(2);
  ack(1);
  ack(2);
  expect(core.unacknowledged).toBe(0);
  expect(acked).toEqual([3, 3, 99, 1, 2]);
  provider.destroy();
});
