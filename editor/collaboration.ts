import { WebsocketProvider } from 'y-websocket';
import * as Y from 'yjs';
import { CLOSE, SCHEMA_VERSION, type Refusal } from './close-codes';
import { HelloSocketCore } from './hello-socket';

/** What is true of the text on this page right now. */
export type SavePhase =
  | 'connecting'
  /** Everything on this page is committed on the server. */
  | 'saved'
  | 'saving'
  /** No connection; edits stay here and are sent when it is back. */
  | 'offline'
  /** The server said no to an edit; the text stays in the page. */
  | 'refused'
  /** The server will not talk about this entry any more; see `ended`. */
  | 'ended';

export interface PersonHere {
  readonly id: string;
  readonly name: string;
  readonly colour: string;
  readonly role: string;
}

export interface CollaborationState {
  readonly phase: SavePhase;
  /** Text on this page that the server has not acknowledged. */
  readonly unsaved: boolean;
  /** The document of the server has arrived at least once. */
  readonly loaded: boolean;
  readonly readOnly: boolean;
  readonly refusal: Refusal | null;
  /** Close code when `phase` is "ended". */
  readonly ended: number | null;
  readonly people: readonly PersonHere[];
}

export interface CollaborationOptions {
  readonly wsUrl: string;
  readonly entryId: string;
  readonly epoch: number;
  readonly onProjected?: (seq: number) => void;
  readonly onEntryChanged?: () => void;
  /** For tests outside a browser. */
  readonly openSocket?: (url: string) => WebSocket;
}

const START: CollaborationState = {
  phase: 'connecting',
  unsaved: false,
  loaded: false,
  readOnly: true,
  refusal: null,
  ended: null,
  people: [],
};
const LONGEST_PAUSE_MS = 30_000;
const SHORTEST_PAUSE_MS = 500;

/**
 * A page's connection to one entry: the shared document, its provider, and the truth about what is saved. Subscribe for
 * changes; destroy when the page goes.
 */
export class Collaboration {
  readonly doc = new Y.Doc();
  readonly provider: WebsocketProvider;
  private readonly core: HelloSocketCore;
  private readonly listeners = new Set<() => void>();
  private state: CollaborationState = START;
  private attempts = 0;
  private later: ReturnType<typeof setTimeout> | undefined;

  constructor(options: CollaborationOptions) {
    this.core = new HelloSocketCore({
      client: () => this.doc.clientID,
      schema: SCHEMA_VERSION,
      epoch: options.epoch,
    });
    const open = options.openSocket ?? ((url: string) => new WebSocket(url));
    this.provider = new WebsocketProvider(options.wsUrl, options.entryId, this.doc, {
      // Tabs must not speak to each other past the server, which checks rights.
      disableBc: true,
      WebSocketPolyfill: this.core.wrap(open),
      maxBackoffTime: this.nextPause(),
    });
    this.core.attach(this.provider);
    this.core.onChange = () => this.refresh();
    this.core.onState = (state) => this.set({ readOnly: state.readOnly });
    this.core.onProjected = (seq) => options.onProjected?.(seq);
    this.core.onEntryChanged = () => options.onEntryChanged?.();
    this.core.onRefused = (frame, code) => this.wasRefused(frame, code);
    this.provider.on('sync', (synced: boolean) => {
      if (!synced) return;
      this.attempts = 0;
      this.set({ loaded: true });
      this.refresh();
    });
    this.provider.on('status', ({ status }) => {
      this.presentAnew(status);
      this.refresh();
    });
    this.provider.on('connection-close', () => {
      // Full jitter: after a fault of the server, its clients must not all come back at the same moment.
      this.attempts += 1;
      this.provider.maxBackoffTime = this.nextPause();
      this.refresh();
    });
    this.provider.on('closed', ({ code }: { code: number }) =>
      this.set({ phase: 'ended', ended: code, readOnly: true }),
    );
    this.provider.awareness.on('change', () => this.set({ people: this.peopleHere() }));
  }

  /** Text on this page that the server has not acknowledged. */
  get hasUnsaved(): boolean {
    return this.core.unacknowledged > 0;
  }

  readonly getState = (): CollaborationState => this.state;

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  destroy(): void {
    this.listeners.clear();
    clearTimeout(this.later);
    this.provider.destroy();
    this.doc.destroy();
  }

  private nextPause(): number {
    const top = Math.min(LONGEST_PAUSE_MS, SHORTEST_PAUSE_MS * 2 ** this.attempts);
    return Math.max(SHORTEST_PAUSE_MS, Math.random() * top);
  }

  private wasRefused(frame: number, code: Refusal): void {
    if (code === 'foreign-id' && frame === 0) return this.takeOtherId();
    // A gap and a full pipe mend themselves by sending again.
    if (code === 'gap') return;
    if (code === 'slow-down' || code === 'storage') {
      this.provider.disconnect();
      clearTimeout(this.later);
      this.later = setTimeout(() => this.provider.connect(), this.nextPause());
      return;
    }
    this.set({ phase: 'refused', refusal: code, readOnly: true });
  }

  /** Somebody else has this page's id, by a chance of one in four thousand million: take another and knock again. */
  private takeOtherId(): void {
    const { awareness } = this.provider;
    this.provider.disconnect();
    const caret = awareness.getLocalState();
    awareness.setLocalState(null);
    this.doc.clientID = awareness.clientID = Math.floor(Math.random() * 2 ** 32);
    awareness.setLocalState(caret);
    this.provider.connect();
  }

  /**
   * Carets across a broken line. The stock library takes a state only when it is newer than what it knows of, also of
   * somebody who has left: so this page's own is made newer, and what was known of others is forgotten.
   */
  private presentAnew(status: string): void {
    const { awareness } = this.provider;
    if (status === 'connected') awareness.setLocalState(awareness.getLocalState());
    if (status !== 'disconnected') return;
    for (const client of awareness.meta.keys()) {
      if (client !== awareness.clientID) awareness.meta.delete(client);
    }
  }

  private refresh(): void {
    const unsaved = this.hasUnsaved;
    if (this.state.phase === 'ended' || this.state.phase === 'refused') return this.set({ unsaved });
    const connected = this.provider.wsconnected && this.provider.synced;
    const phase: SavePhase = !connected
      ? this.state.loaded
        ? 'offline'
        : 'connecting'
      : unsaved
        ? 'saving'
        : 'saved';
    this.set({ phase, unsaved });
  }

  private peopleHere(): PersonHere[] {
    const people = new Map<string, PersonHere>();
    for (const [client, state] of this.provider.awareness.getStates()) {
      const user = (state as { user?: { id?: string; name?: string; color?: string; role?: string } }).user;
      if (client === this.doc.clientID || !user?.id) continue;
      people.set(user.id, {
        id: user.id,
        name: user.name ?? '',
        colour: user.color ?? '#56625c',
        role: user.role ?? '',
      });
    }
    return [...people.values()].sort((a, b) => a.name.localeCompare(b.name));
  }

  private set(change: Partial<CollaborationState>): void {
    const next = { ...this.state, ...change };
    if (JSON.stringify(next) === JSON.stringify(this.state)) return;
    this.state = next;
    for (const listener of this.listeners) listener();
  }
}

/** What to tell somebody whose page has come to an end, by close code. */
export function endedSentence(code: number | null): string {
  switch (code) {
    case CLOSE.notSignedIn:
      return 'You are signed out. What you typed stays on this page; sign in again in another window, then reload this one.';
    case CLOSE.noRight:
      return 'You may no longer open this entry. Copy what you still need, and ask an owner of the notebook.';
    case CLOSE.unknown:
      return 'This entry cannot be opened.';
    case CLOSE.otherEpoch:
      return 'This entry was begun anew in the meantime. Copy what you typed, then reload the page.';
    case CLOSE.reload:
      return 'Motebook was updated. Copy what is not saved yet, then reload the page.';
    default:
      return 'The connection to this entry has ended. Copy what is not saved yet, then reload the page.';
  }
}

/** What to tell somebody whose edit was refused. The text is still in the page. */
export function refusedSentence(code: Refusal | null): string {
  switch (code) {
    case 'locked':
      return 'This entry is no longer a draft, so your last edit was not taken. It stays on this page; copy it if you need it.';
    case 'forbidden':
      return 'You may read this entry but not write in it, so your last edit was not taken. It stays on this page; copy it if you need it.';
    case 'full':
      return 'This entry is full, so your last edit was not taken. Go on in a new entry; reading works as before.';
    case 'too-big':
      return 'Your last edit was too large to be taken at once. It stays on this page; copy it, reload, and put it in by parts.';
    default:
      return 'Your last edit could not be taken. It stays on this page; copy it, then reload.';
  }
}
