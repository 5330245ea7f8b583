import { eq, inArray } from 'drizzle-orm';
import type { Database } from '../db/client';
import { entry } from '../db/schema/index';
import { loadDocument } from '../db/queries/document/load-document';
import { Room } from './room';

/** The entries that are open on this server. An entry is loaded once, however many ask for it at the same moment. */
export class Rooms {
  private readonly open_ = new Map<string, Promise<Room | null>>();
  private readonly ready = new Map<string, Room>();

  constructor(private readonly db: Database) {}

  /** @returns null when there is no such entry. @throws Error when it cannot be loaded; it is tried anew next time. */
  open(entryId: string): Promise<Room | null> {
    const known = this.open_.get(entryId);
    if (known) return known;
    const loading = this.load(entryId);
    this.open_.set(entryId, loading);
    loading.then(
      (room) => {
        if (!room) this.open_.delete(entryId);
      },
      () => this.open_.delete(entryId),
    );
    return loading;
  }

  private async load(entryId: string): Promise<Room | null> {
    const loaded = await loadDocument(this.db, entryId);
    if (!loaded) return null;
    const room = new Room(entryId, loaded, this.db);
    this.ready.set(entryId, room);
    return room;
  }

  /** Forgets an entry that nobody looks at, once everything of it is stored. */
  forgetIfEmpty(entryId: string, drained: () => Promise<void>): void {
    const room = this.ready.get(entryId);
    if (!room || room.members.size > 0) return;
    void drained().then(() => {
      if (room.members.size > 0 || this.ready.get(entryId) !== room) return;
      this.ready.delete(entryId);
      this.open_.delete(entryId);
      room.doc.destroy();
    });
  }

  announced(payload: string): void {
    const { entry: entryId, seq } = JSON.parse(payload) as { entry: string; seq: number };
    void this.ready.get(entryId)?.readOn(seq);
  }

  projected(payload: string): void {
    const { entry: entryId, seq } = JSON.parse(payload) as { entry: string; seq: number };
    this.ready.get(entryId)?.projected(seq);
  }

  async entryChanged(entryId: string): Promise<void> {
    const room = this.ready.get(entryId);
    if (!room) return;
    try {
      const [row] = await this.db
        .select({ lock: entry.lock, state: entry.state })
        .from(entry)
        .where(eq(entry.id, entryId));
      if (row) room.changed(row);
    } catch (error) {
      console.error(`entry ${entryId} could not be read again: ${(error as Error).message}`);
    }
  }

  /** Looks whether any open entry has moved on without being announced: a missed announcement is normal. */
  async catchUp(): Promise<void> {
    if (this.ready.size === 0) return;
    try {
      const heads = await this.db
        .select({ id: entry.id, seq: entry.headSeq })
        .from(entry)
        .where(inArray(entry.id, [...this.ready.keys()]));
      for (const head of heads) void this.ready.get(head.id)?.readOn(head.seq);
    } catch {
      // The database is away; the next turn tries again.
    }
  }
}
