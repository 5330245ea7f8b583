import * as Y from 'yjs';
import type { WebSocket } from 'ws';
import type { Database } from '../db/client';
import { may, type Actor, type EntryState as State, type MemberRole } from '../db/policies/may';
import { CLOSE, SCHEMA_VERSION, type Refusal } from '../editor/close-codes';
import { readPresence, withAccount, type Presence } from './awareness';
import { checkUpdate } from './check-update';
import type { Flusher } from './flusher';
import {
  decodeFrame,
  ackFrame,
  refusedFrame,
  stateFrame,
  step1Frame,
  step2Frame,
  type Incoming,
} from './frames';
import { LIMITS, TokenBucket } from './limits';
import type { Member, Room } from './room';

/** What a connection is given; all its surroundings, so that it can be tested with others absent. */
export interface ConnectionContext {
  readonly db: Database;
  readonly flusher: Flusher;
  readonly openRoom: (entryId: string) => Promise<Room | null>;
  readonly entryId: string;
  readonly closed: (connection: Connection) => void;
}

/**
 * One browser's socket to one entry. Frames are taken in order: hello first, then the stock sync and awareness frames,
 * each checked, stored, acknowledged and only then sent on.
 */
export class Connection implements Member {
  client = 0;
  private room: Room | null = null;
  private frame = 0;
  private chain: Promise<void> = Promise.resolve();
  private readonly bucket = new TokenBucket(LIMITS.messagesPerSecond, LIMITS.messageBurst);
  private readonly awarenessBucket = new TokenBucket(LIMITS.awarenessPerSecond, LIMITS.awarenessPerSecond);
  private latePresence: NodeJS.Timeout | null = null;
  private olderSchema = false;

  constructor(
    private readonly socket: WebSocket,
    public actor: Actor,
    public role: MemberRole,
    private readonly context: ConnectionContext,
  ) {
    socket.binaryType = 'arraybuffer';
    socket.on('message', (data: ArrayBuffer, isBinary: boolean) => {
      if (!isBinary) return this.close(CLOSE.reload, 'text frames are not spoken here');
      const bytes = new Uint8Array(data);
      // In order, one after the other: hello waits for the database, and what follows must wait for hello.
      this.chain = this.chain.then(() => this.take(bytes)).catch((error: unknown) => this.fail(error));
    });
    socket.on('error', () => socket.terminate());
    socket.on('close', () => this.leave());
  }

  get personId(): string {
    return this.actor.personId;
  }

  mayWrite(state: string): boolean {
    return !this.olderSchema && may(this.actor, 'entry.write', { member: this.role, state: state as State });
  }

  send(frame: Uint8Array): void {
    if (this.socket.readyState !== this.socket.OPEN) return;
    // A reader that does not read would make this server's memory grow without bound.
    if (this.socket.bufferedAmount + frame.length > LIMITS.bufferedBytes)
      return this.close(CLOSE.overloaded, 'reading too slowly');
    this.socket.send(frame);
  }

  /** Rights were looked up again. */
  reconsider(actor: Actor | null, role: MemberRole | null): void {
    if (actor === null) return this.close(CLOSE.notSignedIn, 'signed out');
    if (role === null) return this.close(CLOSE.noRight, 'no right to this entry');
    const before = this.room && this.mayWrite(this.room.state);
    this.actor = actor;
    this.role = role;
    if (this.room && this.mayWrite(this.room.state) !== before)
      this.send(stateFrame(this.room.stateFor(this)));
  }

  /** Says something now and then: a browser that hears nothing for half a minute takes the line for dead. */
  heartbeat(): void {
    if (this.room) this.send(stateFrame(this.room.stateFor(this)));
  }

  close(code: number, reason: string): void {
    this.socket.close(code, reason);
  }

  private fail(error: unknown): void {
    console.error(`socket of entry ${this.context.entryId}: ${(error as Error).message}`);
    this.close(CLOSE.overloaded, 'the entry cannot be served at the moment');
  }

  private async take(bytes: Uint8Array): Promise<void> {
    if (this.socket.readyState !== this.socket.OPEN) return;
    let incoming: Incoming;
    try {
      incoming = decodeFrame(bytes);
    } catch {
      return this.close(CLOSE.reload, 'not a frame of this protocol');
    }
    if (incoming.kind === 'hello') return this.hello(incoming);
    const counted = incoming.kind === 'update' ? (this.frame += 1) : 0;
    if (!this.room) return this.send(refusedFrame(counted, 'forbidden'));
    if (incoming.kind === 'awareness') return this.takePresence(incoming.payload, this.room);
    if (incoming.kind === 'query-awareness') return;
    if (!this.bucket.take()) {
      if (incoming.kind === 'update') this.refuse(counted, 'slow-down');
      return;
    }
    if (incoming.kind === 'step1') return this.answerStep1(incoming.stateVector, this.room);
    this.takeUpdate(counted, incoming.payload, this.room);
  }

  private async hello(hello: Extract<Incoming, { kind: 'hello' }>): Promise<void> {
    if (this.room) return this.close(CLOSE.reload, 'hello twice');
    const room = await this.context.openRoom(this.context.entryId);
    if (!room) return this.close(CLOSE.unknown, 'no such entry');
    if (hello.epoch !== room.epoch) return this.close(CLOSE.otherEpoch, 'the entry was begun anew');
    if (hello.schema > SCHEMA_VERSION) return this.close(CLOSE.reload, 'this page is newer than the server');
    this.olderSchema = hello.schema < SCHEMA_VERSION;
    const { rows } = await this.context.db.$client.query<{ answer: string }>(
      'SELECT register_client($1, $2, $3, $4) AS answer',
      [room.entryId, room.epoch, hello.client, this.actor.personId],
    );
    if (rows[0]?.answer !== 'ok') return this.send(refusedFrame(0, 'foreign-id'));
    if (this.socket.readyState !== this.socket.OPEN) return;
    this.client = hello.client;
    this.room = room;
    this.send(stateFrame(room.stateFor(this)));
    room.join(this);
    this.send(step1Frame(Y.encodeStateVector(room.doc)));
  }

  private answerStep1(stateVector: Uint8Array, room: Room): void {
    try {
      this.send(step2Frame(Y.encodeStateAsUpdate(room.doc, stateVector)));
    } catch {
      this.close(CLOSE.reload, 'not a state vector');
    }
  }

  private takeUpdate(frame: number, payload: Uint8Array, room: Room): void {
    const check = checkUpdate(payload, {
      doc: room.doc,
      ownClient: this.client,
      ownKnown: room.known(this.client),
      ownQueued: room.placedInQueue(this.client),
    });
    if (!check.ok) return this.refuse(frame, check.code);
    if (check.nothingNew) return this.send(ackFrame(frame, room.seq));
    if (!this.mayWrite(room.state))
      return this.refuse(frame, room.state === 'draft' ? 'forbidden' : 'locked');
    room.queue(this.client, check.ownClock, check.placed);
    this.context.flusher.add({
      entryId: room.entryId,
      epoch: room.epoch,
      lock: room.lock,
      personId: this.actor.personId,
      loginId: this.actor.loginId,
      client: this.client,
      payload,
      done: (outcome) => {
        if ('seq' in outcome) return room.committed(this, frame, outcome.seq, payload);
        room.unqueue(this.client);
        if (outcome.refused === 'epoch') this.close(CLOSE.otherEpoch, 'the entry was begun anew');
        else this.refuse(frame, outcome.refused);
      },
    });
  }

  /** Says no, and what it takes to go on: after a gap the client is asked again for all that the server lacks. */
  private refuse(frame: number, code: Refusal): void {
    this.send(refusedFrame(frame, code));
    if (code === 'gap' && this.room) this.send(step1Frame(Y.encodeStateVector(this.room.doc)));
  }

  private takePresence(payload: Uint8Array, room: Room): void {
    const presence = readPresence(payload, this.client);
    if (!presence) return;
    const shown = withAccount(presence, { id: this.actor.personId, name: this.actor.name }, this.role);
    if (this.awarenessBucket.take()) return this.showPresence(shown, room);
    // Too quick: the newest state is shown a little later, so that the caret still ends where it is.
    if (this.latePresence) clearTimeout(this.latePresence);
    this.latePresence = setTimeout(() => this.showPresence(shown, room), 150);
  }

  private showPresence(presence: Presence, room: Room): void {
    if (room.members.has(this)) room.present(presence, this);
  }

  private leave(): void {
    if (this.latePresence) clearTimeout(this.latePresence);
    this.room?.leave(this);
    this.context.closed(this);
  }
}
