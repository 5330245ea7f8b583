import { and, desc, eq, sql } from 'drizzle-orm';
import * as Y from 'yjs';
import { yDocToProsemirrorJSON } from '@tiptap/y-tiptap';
import type { Database } from '../../db/client';
import { readTail, type LoadedDocument } from '../../db/queries/document/load-document';
import { entrySnapshot } from '../../db/schema/index';
import { FRAGMENT } from '../../editor/schema/index';

/** A snapshot after so many updates keeps opening an entry quick. */
const UPDATES_PER_SNAPSHOT = 200;

/**
 * Keeps a state beside the log once it has grown. The state is made from all rows, not from the last snapshot, and is kept
 * only when both say the same: so a bad snapshot is found before it is ever built upon.
 * @throws Error when snapshot and rows disagree.
 */
export async function saveSnapshotIfDue(
  db: Database,
  entryId: string,
  loaded: LoadedDocument,
): Promise<boolean> {
  const [last] = await db
    .select({ seq: entrySnapshot.seq })
    .from(entrySnapshot)
    .where(and(eq(entrySnapshot.entryId, entryId), eq(entrySnapshot.epoch, loaded.epoch)))
    .orderBy(desc(entrySnapshot.seq))
    .limit(1);
  if (loaded.seq - (last?.seq ?? 0) < UPDATES_PER_SNAPSHOT) return false;
  const whole = new Y.Doc();
  const rows = (await readTail(db, entryId, loaded.epoch, 0)).filter((row) => row.seq <= loaded.seq);
  whole.transact(() => {
    for (const row of rows) Y.applyUpdate(whole, row.payload);
  });
  const same =
    Buffer.from(Y.encodeStateVector(whole)).equals(Buffer.from(Y.encodeStateVector(loaded.doc))) &&
    JSON.stringify(yDocToProsemirrorJSON(whole, FRAGMENT)) ===
      JSON.stringify(yDocToProsemirrorJSON(loaded.doc, FRAGMENT));
  if (!same) throw new Error(`the snapshot of entry ${entryId} does not say what its log says`);
  const state = Buffer.from(Y.encodeStateAsUpdate(whole));
  whole.destroy();
  await db.execute(sql`SELECT save_snapshot(${entryId}, ${loaded.epoch}, ${loaded.seq}, ${state})`);
  return true;
}
