import * as Y from 'yjs';
import type { Refusal } from '../editor/close-codes';
import { entrySchema, FRAGMENT } from '../editor/schema/index';
import { LIMITS } from './limits';

/**
 * Checks an update before it is stored or applied (integrity rule C4). Yjs itself accepts anything: frames that burn
 * somebody else's clock, that write under another root, or whose content the editor does not know. Attribution never
 * rests on Yjs ids, but a client may only extend the id that its account registered, without a gap. And it may only name
 * what the log holds: a row that builds on something missing would stay pending, and the entry could not be opened again.
 */
export interface UpdateContext {
  /** The committed document. */
  readonly doc: Y.Doc;
  /** The id that this socket registered. */
  readonly ownClient: number;
  /** Clock up to which this client's content is committed or on its way into the store. */
  readonly ownKnown: number;
  /** Where this client's content that is on its way stands, in ascending order of clock. */
  readonly ownQueued?: readonly Placed[];
}

/** Where a piece of a client's content stands: as the attribute of this name, or (null) among the children of something. */
export interface Placed {
  readonly clock: number;
  readonly length: number;
  readonly attribute: string | null;
}

export type UpdateCheck =
  | { readonly ok: true; readonly nothingNew: true }
  | {
      readonly ok: true;
      readonly nothingNew: false;
      readonly ownClock: number;
      readonly placed: readonly Placed[];
    }
  | { readonly ok: false; readonly code: Refusal };

const NODES = new Set(Object.keys(entrySchema.nodes));
const MARKS = new Set(Object.keys(entrySchema.marks));
const ATTRIBUTES = new Set(
  Object.values(entrySchema.nodes).flatMap((type) => Object.keys(type.spec.attrs ?? {})),
);

const refuse = (code: Refusal): UpdateCheck => ({ ok: false, code });

export function checkUpdate(payload: Uint8Array, context: UpdateContext): UpdateCheck {
  let decoded: ReturnType<typeof Y.decodeUpdate>;
  try {
    decoded = Y.decodeUpdate(payload);
  } catch {
    return refuse('schema');
  }
  const { ownClient } = context;
  let ownClock = context.ownKnown;
  // Of others, only what is committed: what is on its way may still be refused.
  const known = (client: number) => (client === ownClient ? ownClock : Y.getState(context.doc.store, client));
  let length = 0;
  const placed: Placed[] = [];
  for (const struct of decoded.structs) {
    const { client, clock } = struct.id;
    if (struct instanceof Y.Skip) return refuse('gap');
    if (clock + struct.length <= known(client)) continue;
    if (client !== ownClient) return refuse('foreign-id');
    if (clock > ownClock) return refuse('gap');
    length += struct.length;
    if (length > LIMITS.frameLength) return refuse('too-big');
    if (struct instanceof Y.Item) {
      if (references(struct).some((id) => id.clock >= (id.client === ownClient ? clock : known(id.client))))
        return refuse('gap');
      const attribute = attributeOf(struct, context, placed);
      if (attribute !== undefined) {
        if (!isAllowed(struct, attribute)) return refuse('schema');
        placed.push({ clock, length: struct.length, attribute });
      }
    }
    ownClock = Math.max(ownClock, clock + struct.length);
  }
  for (const [client, ranges] of decoded.ds.clients) {
    if (ranges.some((range) => range.clock + range.len > known(client))) return refuse('gap');
  }
  if (length === 0 && deletionsAreKnown(decoded.ds, context.doc)) return { ok: true, nothingNew: true };
  return { ok: true, nothingNew: false, ownClock, placed };
}

/** The items that an item is placed by: its neighbours and what it stands in. */
function references(item: Y.Item): Y.ID[] {
  return [item.origin, item.rightOrigin, item.parent as unknown].filter((one) => one instanceof Y.ID);
}

/**
 * The attribute that an item is the value of; null for content among children. An item with a neighbour does not say itself
 * where it stands: it takes that over, from the right one first, as Yjs does when it places the item.
 * @returns undefined when the neighbour's place is gone; the item will be nothing then, too.
 */
function attributeOf(
  item: Y.Item,
  context: UpdateContext,
  placed: readonly Placed[],
): string | null | undefined {
  if ((item.parent as unknown) !== null) return item.parentSub;
  for (const id of [item.rightOrigin, item.origin]) {
    if (id === null) continue;
    if (id.clock < Y.getState(context.doc.store, id.client)) {
      const neighbour: Y.Item | Y.GC = Y.getItem(context.doc.store, id);
      if (neighbour instanceof Y.Item) return neighbour.parentSub;
      continue;
    }
    const own = findPlaced(placed, id.clock) ?? findPlaced(context.ownQueued ?? [], id.clock);
    if (own) return own.attribute;
  }
  return undefined;
}

/** By halving, because a hostile frame may name a hundred thousand neighbours. @param all - in ascending order of clock. */
function findPlaced(all: readonly Placed[], clock: number): Placed | undefined {
  let [low, high] = [0, all.length - 1];
  while (low <= high) {
    const middle = (low + high) >> 1;
    const one = all[middle]!;
    if (clock < one.clock) high = middle - 1;
    else if (clock >= one.clock + one.length) low = middle + 1;
    else return one;
  }
  return undefined;
}

/** Whether an item is content that the editor's schema knows, in the one place where it may stand. */
function isAllowed(item: Y.Item, attribute: string | null): boolean {
  // While decoding, a parent is the name of a root, the id of an item, or unknown (taken from a neighbour).
  const parent = item.parent as unknown;
  if (typeof parent === 'string' && parent !== FRAGMENT) return false;
  const { content } = item;
  if (attribute !== null && !ATTRIBUTES.has(attribute)) return false;
  // What was deleted again, a setting that was changed twice included.
  if (content instanceof Y.ContentDeleted) return true;
  if (content instanceof Y.ContentAny) return attribute !== null;
  if (attribute !== null) return false;
  if (content instanceof Y.ContentString) return true;
  // Two marks of one kind on the same text get a hash behind their name.
  if (content instanceof Y.ContentFormat) return MARKS.has(content.key.split('--')[0] ?? '');
  if (content instanceof Y.ContentType) {
    const { type } = content;
    if (type instanceof Y.XmlText) return true;
    return type instanceof Y.XmlElement && !(type instanceof Y.XmlHook) && NODES.has(type.nodeName);
  }
  return false;
}

/** An idle reader's answer repeats all deletions it knows of: nothing new, so no row. */
function deletionsAreKnown(ds: ReturnType<typeof Y.decodeUpdate>['ds'], doc: Y.Doc): boolean {
  if (ds.clients.size === 0) return true;
  const stored = Y.createDeleteSetFromStructStore(doc.store);
  for (const [client, ranges] of ds.clients) {
    const have = stored.clients.get(client) ?? [];
    for (const range of ranges) {
      const end = range.clock + range.len;
      if (!have.some((one) => one.clock <= range.clock && one.clock + one.len >= end)) return false;
    }
  }
  return true;
}
