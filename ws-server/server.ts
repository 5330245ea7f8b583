import { createServer, type IncomingMessage } from 'node:http';
import type { AddressInfo, Socket } from 'node:net';
import { WebSocketServer, type WebSocket } from 'ws';
import { connect } from '../db/client';
import type { Actor, MemberRole } from '../db/policies/may';
import { CLOSE } from '../editor/close-codes';
import { authenticate } from './authenticate';
import { Connection } from './connection';
import { Flusher } from './flusher';
import { LIMITS } from './limits';
import { Listener } from './listener';
import { findRights, findRole } from './rights';
import { Rooms } from './rooms';
import { databaseStore } from './update-store';

export interface ServerOptions {
  readonly port: number;
  readonly databaseUrl: string;
  readonly publicUrl: string;
  readonly secret: string;
}

export interface RunningServer {
  readonly port: number;
  /** Takes no new sockets, stores what waits, tells everybody to come back, ends. */
  stop(): Promise<void>;
}

const ENTRY_PATH = /^\/([0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12})$/;

/** Starts the websocket server on loopback. Port 0 takes a free one. */
export async function startServer(options: ServerOptions): Promise<RunningServer> {
  const db = connect(options.databaseUrl, { max: 8, name: 'motebook-ws' });
  const flusher = new Flusher(databaseStore(db));
  const rooms = new Rooms(db);
  const connections = new Map<Connection, { entryId: string; socket: WebSocket; alive: boolean }>();

  const recheck = async (connection: Connection, entryId: string) => {
    try {
      const { actor, role } = await findRights(db, entryId, connection.actor.loginId);
      connection.reconsider(actor, role);
    } catch (error) {
      console.error(`rights could not be looked up: ${(error as Error).message}`);
    }
  };
  const recheckAll = (personId?: string) => {
    for (const [connection, { entryId }] of connections) {
      if (personId === undefined || connection.personId === personId) void recheck(connection, entryId);
    }
  };
  const catchUp = () => {
    void rooms.catchUp();
    recheckAll();
  };
  const listener = new Listener(
    options.databaseUrl,
    {
      motebook_update: (payload) => rooms.announced(payload),
      motebook_projected: (payload) => rooms.projected(payload),
      motebook_entry: (entryId) => void rooms.entryChanged(entryId),
      motebook_access: (personId) => recheckAll(personId),
    },
    catchUp,
  );
  await listener.start();

  const sockets = new WebSocketServer({
    noServer: true,
    maxPayload: LIMITS.messageBytes,
    perMessageDeflate: false,
  });
  const http = createServer((_request, response) => {
    response.writeHead(426, { 'Content-Type': 'text/plain; charset=utf-8', Upgrade: 'websocket' });
    response.end('This address speaks websocket only.\n');
  });
  http.on('upgrade', (request, socket: Socket, head) => {
    socket.on('error', () => socket.destroy());
    void upgrade(request, socket, head);
  });

  async function upgrade(request: IncomingMessage, socket: Socket, head: Buffer): Promise<void> {
    const path = new URL(request.url ?? '/', 'http://localhost').pathname;
    const entryId = ENTRY_PATH.exec(path)?.[1];
    try {
      const who = await authenticate(request, { db, publicUrl: options.publicUrl, secret: options.secret });
      if ('status' in who) return reject(socket, who.status === 401 ? '401 Unauthorized' : '403 Forbidden');
      socket.setNoDelay(true);
      const role = entryId ? await findRole(db, entryId, who.actor.personId) : null;
      sockets.handleUpgrade(request, socket, head, (webSocket) => {
        // Told over the open socket, because a browser cannot read the status of a refused upgrade.
        if (!entryId || role === null) return webSocket.close(CLOSE.unknown, 'nothing here that you may see');
        accept(webSocket, who.actor, role, entryId);
      });
    } catch (error) {
      console.error(`a socket could not be opened: ${(error as Error).message}`);
      reject(socket, '503 Service Unavailable');
    }
  }

  function accept(webSocket: WebSocket, actor: Actor, role: MemberRole, entryId: string) {
    const own = [...connections.keys()].filter((one) => one.personId === actor.personId);
    if (own.length >= LIMITS.socketsPerAccount)
      return webSocket.close(CLOSE.overloaded, 'too many open pages');
    const connection = new Connection(webSocket, actor, role, {
      db,
      flusher,
      entryId,
      openRoom: (id) => rooms.open(id),
      closed: (one) => {
        connections.delete(one);
        rooms.forgetIfEmpty(entryId, () => flusher.drain());
      },
    });
    const held = { entryId, socket: webSocket, alive: true };
    connections.set(connection, held);
    webSocket.on('pong', () => (held.alive = true));
  }

  const timers = [
    setInterval(() => void rooms.catchUp(), LIMITS.tailMs),
    setInterval(() => recheckAll(), LIMITS.recheckMs),
    setInterval(() => {
      for (const [connection, held] of connections) {
        if (!held.alive) held.socket.terminate();
        held.alive = false;
        held.socket.ping();
        connection.heartbeat();
      }
    }, LIMITS.pingMs),
  ];

  await new Promise<void>((resolve, refuse) => {
    http.once('error', refuse);
    http.listen(options.port, '127.0.0.1', resolve);
  });
  return {
    port: (http.address() as AddressInfo).port,
    async stop() {
      for (const timer of timers) clearInterval(timer);
      http.close();
      await flusher.drain();
      for (const { socket } of connections.values()) socket.close(1012, 'the server starts again');
      await listener.stop();
      sockets.close();
      await db.$client.end();
    },
  };
}

function reject(socket: Socket, status: string): void {
  socket.end(`HTTP/1.1 ${status}\r\nConnection: close\r\nContent-Length: 0\r\n\r\n`);
}
