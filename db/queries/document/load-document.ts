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

interface Row {
  readonly seq: number;
  readonly payload: Uint8Array;
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
 * An entry's document from its newest snapshot and the updates behind it, applied in one transaction of Yjs. The rows are
 * the record: a snapshot that cannot be used is told of, and they alone are replayed.
 * @returns null when there is no such entry.
 * @throws Error when the log has a hole or an update cannot be applied: a failed load must never look like an empty page.
 */
export async function loadDocument(db: Connection, entryId: string): Promise<LoadedDocument | null> {
  const [head] = await db.select().from(entry).where(eq(entry.id, entryId));
  if (!head) return null;
  const { epoch, lock, state, notebookId, headSeq } = head;
  const [snapshot] = await db
    .select({ seq: entrySnapshot.seq, state: entrySnapshot.state })
    .from(entrySnapshot)
    .where(and(eq(entrySnapshot.entryId, entryId), eq(entrySnapshot.epoch, epoch)))
    .orderBy(desc(entrySnapshot.seq))
    .limit(1);
  if (snapshot) {
    try {
      const tail = await readTail(db, entryId, epoch, snapshot.seq);
      const start = { seq: snapshot.seq, payload: snapshot.state };
      return { ...replay(entryId, tail, headSeq, start), epoch, lock, state, notebookId };
    } catch (error) {
      console.error(
        `entry ${entryId}: its snapshot could not be used, so all rows are replayed: ${(error as Error).message}`,
      );
    }
  }
  const rows = await readTail(db, entryId, epoch, 0);
  return { ...replay(entryId, rows, headSeq), epoch, lock, state, notebookId };
}

/**
 * The document that updates make, with what they follow upon.
 * @param rows - in order, without a hole, after `start`.   @param least - the log must reach at least this update.
 * @throws Error as loadDocument.
 */
export function replay(
  entryId: string,
  rows: readonly Row[],
  least: number,
  start: Row | null = null,
): { doc: Y.Doc; seq: number } {
  const doc = new Y.Doc();
  let seq = start?.seq ?? 0;
  doc.transact(() => {
    if (start) Y.applyUpdate(doc, start.payload);
    for (const update of rows) {
      if (update.seq !== seq + 1) throw new Error(`entry ${entryId}: update ${seq + 1} is missing`);
      Y.applyUpdate(doc, update.payload);
      seq = update.seq;
    }
  });
  if (seq < least) throw new Error(`entry ${entryId}: the log ends at ${seq}, its head says ${least}`);
  if (doc.store.pendingStructs || doc.store.pendingDs)
    throw new Error(`entry ${entryId}: the log has parts that do not fit`);
  return { doc, seq };
}
