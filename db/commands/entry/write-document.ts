import { randomUUID } from 'node:crypto';
import { sql } from 'drizzle-orm';
import * as Y from 'yjs';
import type { Transaction } from '../../client';
import { AppError } from '../../errors';
import type { Actor } from '../../policies/may';
import { loadDocument } from '../../queries/document/load-document';
import { ROOT, toShared, type DocumentNode } from './document-json';

/**
 * Edits that the server makes to an entry's document on somebody's behalf. They go the same way as a browser's: a client
 * id registered to the account, one update, append_updates. Never from text to a new document: that would double it.
 */

/** Gives a new entry its first, empty paragraph; done once, in the transaction that makes the entry. */
export async function seedEntry(tx: Transaction, input: { entryId: string; actor: Actor }): Promise<void> {
  await appendServerEdit(tx, { ...input, append: [{ type: 'paragraph' }] });
}

/**
 * Puts nodes at the end of an entry; in one that is still blank they take the place of its empty paragraph.
 * @throws AppError locked | forbidden | conflict - as append_updates refuses.
 */
export async function appendServerEdit(
  tx: Transaction,
  input: { entryId: string; actor: Actor; append: readonly DocumentNode[] },
): Promise<void> {
  const loaded = await loadDocument(tx, input.entryId);
  if (!loaded) throw new AppError('not-found');
  const { doc, epoch, lock } = loaded;
  const before = Y.encodeStateVector(doc);
  doc.transact(() => {
    const root = doc.getXmlFragment(ROOT);
    if (isBlank(root)) root.delete(0, root.length);
    root.insert(root.length, input.append.map(toShared));
  });
  const payload = Buffer.from(Y.encodeStateAsUpdate(doc, before));
  const client = doc.clientID;
  doc.destroy();
  await tx.execute(
    sql`SELECT register_client(${input.entryId}, ${epoch}, ${client}, ${input.actor.personId})`,
  );
  const { rows } = await tx.execute<{ refusal: string | null }>(sql`
    SELECT refusal FROM append_updates(${input.entryId}, ${lock}, ${epoch}, ${input.actor.personId}, ${input.actor.loginId},
      ${randomUUID()}, ARRAY[${client}]::bigint[], ARRAY[${payload}]::bytea[])`);
  const refusal = rows[0]?.refusal;
  if (refusal === 'locked' || refusal === 'forbidden') throw new AppError(refusal);
  if (refusal) throw new AppError('conflict', { message: `append_updates refused with ${refusal}` });
}

/** Only the empty paragraph that every entry begins with. */
function isBlank(root: Y.XmlFragment): boolean {
  const only = root.length === 1 ? root.get(0) : null;
  return only instanceof Y.XmlElement && only.nodeName === 'paragraph' && only.length === 0;
}
