import * as Y from 'yjs';
import type { Database } from '../db/client';
import { SCHEMA_VERSION } from '../editor/close-codes';
import {
  awarenessFrame,
  ackFrame,
  entryChangedFrame,
  projectedFrame,
  stateFrame,
  updateFrame,
  type EntryState,
} from './frames';
import { encodePresence, type Presence } from './awareness';
import type { Placed } from './check-update';
import { readTail, type LoadedDocument } from '../db/queries/document/load-document';

/** What a room needs of a socket. */
export interface Member {
  readonly personId: string;
  readonly client: number;
  send(frame: Uint8Array): void;
  /** Whether this person may write, by the policy, at this moment. */
  mayWrite(state: string): boolean;
}

/**
 * One open entry on this server: the committed document, who is here, and the order in which updates reach them. An
 * update is applied and sent on only once it is committed, in the order of its number, whoever wrote it.
 */
export class Room {
  readonly members = new Set<Member>();
  readonly doc: Y.Doc;
  readonly epoch: number;
  lock: number;
  state: string;
  seq: number;
  private readonly presence = new Map<number, Presence>();
  /** Each client's content on its way into the store: up to which clock, and where it stands. */
  private readonly queued = new Map<number, { clock: number; placed: readonly Placed[] }>();
  /** Own updates that are committed but whose turn has not come: number → who wrote it and under which frame. */
  private readonly origins = new Map<number, { member: Member; frame: number }>();
  private reading: Promise<void> | null = null;

  constructor(
    readonly entryId: string,
    loaded: LoadedDocument,
    private readonly db: Database,
  ) {
    this.doc = loaded.doc;
    this.epoch = loaded.epoch;
    this.lock = loaded.lock;
    this.state = loaded.state;
    this.seq = loaded.seq;
  }

  known(client: number): number {
    return Math.max(Y.getState(this.doc.store, client), this.queued.get(client)?.clock ?? 0);
  }

  placedInQueue(client: number): readonly Placed[] {
    return this.queued.get(client)?.placed ?? [];
  }

  queue(client: number, clock: number, placed: readonly Placed[]): void {
    const stored = Y.getState(this.doc.store, client);
    const before = this.placedInQueue(client).filter((one) => one.clock + one.length > stored);
    this.queued.set(client, { clock, placed: [...before, ...placed] });
  }

  /** A queued update was refused: what was queued behind it hangs in the air, so the client must send anew. */
  unqueue(client: number): void {
    this.queued.delete(client);
  }

  /** An own update was committed as number `seq`. */
  committed(member: Member, frame: number, seq: number, payload: Uint8Array): void {
    if (seq <= this.seq) {
      // The log was read before the answer to our own commit came.
      member.send(ackFrame(frame, seq));
      return;
    }
    this.origins.set(seq, { member, frame });
    if (seq === this.seq + 1) this.advance(seq, payload);
    else void this.readOn(seq);
  }

  /** Somebody else (another server, the web process) committed up to `seq`. */
  async readOn(seq: number): Promise<void> {
    while (seq > this.seq) {
      if (this.reading) {
        await this.reading;
        continue;
      }
      const before = this.seq;
      this.reading = this.readOnce().finally(() => (this.reading = null));
      await this.reading;
      if (this.seq === before) return;
    }
  }

  private async readOnce(): Promise<void> {
    try {
      for (const row of await readTail(this.db, this.entryId, this.epoch, this.seq)) {
        if (row.seq === this.seq + 1) this.advance(row.seq, row.payload);
      }
    } catch (error) {
      // Missed reads are normal: the log is looked at again every two seconds.
      console.error(`entry ${this.entryId}: the log could not be read: ${(error as Error).message}`);
    }
  }

  private advance(seq: number, payload: Uint8Array): void {
    Y.applyUpdate(this.doc, payload, 'log');
    this.seq = seq;
    const origin = this.origins.get(seq);
    this.origins.delete(seq);
    const frame = updateFrame(payload);
    origin?.member.send(ackFrame(origin.frame, seq));
    for (const member of this.members) if (member !== origin?.member) member.send(frame);
  }

  stateFor(member: Member): EntryState {
    return {
      epoch: this.epoch,
      lock: this.lock,
      schema: SCHEMA_VERSION,
      readOnly: !member.mayWrite(this.state),
      state: this.state,
    };
  }

  /** The entry's row changed: tell everybody what holds now. */
  changed(row: { lock: number; state: string }): void {
    const differs = row.lock !== this.lock || row.state !== this.state;
    this.lock = row.lock;
    this.state = row.state;
    for (const member of this.members) {
      if (differs) member.send(stateFrame(this.stateFor(member)));
      member.send(entryChangedFrame());
    }
  }

  projected(seq: number): void {
    const frame = projectedFrame(seq);
    for (const member of this.members) member.send(frame);
  }

  /** Somebody's caret moved, or (state null) they left. */
  present(presence: Presence, from: Member): void {
    if (presence.state === null) this.presence.delete(presence.client);
    else this.presence.set(presence.client, presence);
    const frame = awarenessFrame(encodePresence([presence]));
    for (const member of this.members) if (member !== from) member.send(frame);
  }

  join(member: Member): void {
    this.members.add(member);
    if (this.presence.size > 0) member.send(awarenessFrame(encodePresence([...this.presence.values()])));
  }

  leave(member: Member): void {
    this.members.delete(member);
    this.queued.delete(member.client);
    const last = this.presence.get(member.client);
    // Under the same clock, as the stock server does: one step on is the client's own, when it comes back.
    if (last) this.present({ ...last, state: null }, member);
  }
}
