import { and, asc, desc, eq, gt } from 'drizzle-orm';
import * as Y from 'yjs';
import type { Connection } from '../../client';
import { entry, entrySnapshot, entryUpdate } from '../../schema/index';

export interface LoadedDocument {
  readonly doc: Y.Doc;
  readonly epoch: number;
  readonly lock: number;
  readonly state: string;
  readonly notebookId: string;
  /** Last update that `doc` contains. */
  readonly seq: number;
}

/** Updates of an entry after `seq`, in order. */
export async function readTail(db: Connection, entryId: string, epoch: number, seq: number) {
  return db
    .select({ seq: entryUpdate.seq, payload: entryUpdate.payload })
    .from(entryUpdate)
    .where(and(eq(entryUpdate.entryId, entryId), eq(entryUpdate.epoch, epoch), gt(entryUpdate.seq, seq)))
    .orderBy(asc(entryUpdate.seq));
}

/**
 * An entry's document from its newest snapshot and the updates behind it, applied in one transaction of Yjs.
 * @returns null when there is no such entry.
 * @throws Error when the log has a hole or an update cannot be applied: a failed load must never look like an empty page.
 */
export async function loadDocument(db: Connection, entryId: string): Promise<LoadedDocument | null> {
  const [row] = await db.select().from(entry).where(eq(entry.id, entryId));
  if (!row) return null;
  const [snapshot] = await db
    .select({ seq: entrySnapshot.seq, state: entrySnapshot.state })
    .from(entrySnapshot)
    .where(and(eq(entrySnapshot.entryId, entryId), eq(entrySnapshot.epoch, row.epoch)))
    .orderBy(desc(entrySnapshot.seq))
    .limit(1);
  const tail = await readTail(db, entryId, row.epoch, snapshot?.seq ?? 0);
  const doc = new Y.Doc();
  let seq = snapshot?.seq ?? 0;
  doc.transact(() => {
    if (snapshot) Y.applyUpdate(doc, snapshot.state);
    for (const update of tail) {
      if (update.seq !== seq + 1) throw new Error(`entry ${entryId}: update ${seq + 1} is missing`);
      Y.applyUpdate(doc, update.payload);
      seq = update.seq;
    }
  });
  if (seq < row.headSeq)
    throw new Error(`entry ${entryId}: the log ends at ${seq}, its head says ${row.headSeq}`);
  if (doc.store.pendingStructs || doc.store.pendingDs)
    throw new Error(`entry ${entryId}: the log has parts that do not fit`);
  return { doc, epoch: row.epoch, lock: row.lock, state: row.state, notebookId: row.notebookId, seq };
}
