import { and, desc, eq, sql } from 'drizzle-orm';
import * as Y from 'yjs';
import { yDocToProsemirrorJSON } from '@tiptap/y-tiptap';
import type { Database } from '../../db/client';
import { readTail, replay, type LoadedDocument } from '../../db/queries/document/load-document';
import { entrySnapshot } from '../../db/schema/index';
import { FRAGMENT } from '../../editor/schema/index';

/** A snapshot after so many updates keeps opening an entry quick. */
export const UPDATES_PER_SNAPSHOT = 200;

/**
 * Keeps a state beside the log once it has grown (integrity rule C6). The state is made from all rows, never from an
 * earlier snapshot, and what was loaded must say the same: so a snapshot gone bad is found before it is built upon.
 * @returns the document to go on with: what was loaded, or, where that was wrong, what the rows say.
 */
export async function keepSnapshotWhenDue(
  db: Database,
  entryId: string,
  loaded: LoadedDocument,
  complain: (fault: string) => void,
): Promise<Y.Doc> {
  const [last] = await db
    .select({ seq: entrySnapshot.seq })
    .from(entrySnapshot)
    .where(and(eq(entrySnapshot.entryId, entryId), eq(entrySnapshot.epoch, loaded.epoch)))
    .orderBy(desc(entrySnapshot.seq))
    .limit(1);
  if (loaded.seq - (last?.seq ?? 0) < UPDATES_PER_SNAPSHOT) return loaded.doc;
  const rows = await readTail(db, entryId, loaded.epoch, 0);
  const { doc: whole } = replay(
    entryId,
    rows.filter((row) => row.seq <= loaded.seq),
    loaded.seq,
  );
  const state = Buffer.from(Y.encodeStateAsUpdate(whole));
  await db.execute(sql`SELECT save_snapshot(${entryId}, ${loaded.epoch}, ${loaded.seq}, ${state})`);
  if (sayTheSame(whole, loaded.doc)) {
    whole.destroy();
    return loaded.doc;
  }
  complain('its snapshot does not say what its log says; a new one was made from the log');
  loaded.doc.destroy();
  return whole;
}

function sayTheSame(one: Y.Doc, other: Y.Doc): boolean {
  return (
    Buffer.from(Y.encodeStateVector(one)).equals(Buffer.from(Y.encodeStateVector(other))) &&
    JSON.stringify(yDocToProsemirrorJSON(one, FRAGMENT)) ===
      JSON.stringify(yDocToProsemirrorJSON(other, FRAGMENT))
  );
}
