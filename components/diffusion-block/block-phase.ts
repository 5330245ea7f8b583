import type { BlockState } from '@/db/inputs/block-answer';
import { settingsOf, type BlockAttributes } from '@/db/inputs/block-settings';
import { isNamed } from '@/db/inputs/block-words';

/**
 * How a block on this page stands: what the server says of it, unless the page is ahead of the server.
 * "empty": it names no file. "updating": the server has not seen it as it is here. The others are the server's own.
 */
export type BlockPhase = 'empty' | 'updating' | 'waiting' | 'done' | 'failed';

export function phaseOf(block: BlockState | null, attributes: BlockAttributes): BlockPhase {
  if (attributes.readingIds.length === 0) return 'empty';
  if (block === null || !isCurrent(block, attributes)) return 'updating';
  return block.status === 'empty' ? 'updating' : block.status;
}

/**
 * What the server says of a block: among copies that kept the id of their original, the one that asks the same question.
 * @returns null while the server does not know the block.
 */
export function findBlock(blocks: readonly BlockState[], attributes: BlockAttributes): BlockState | null {
  const named = blocks.filter((one) => isNamed(one.blockId, attributes.blockId));
  return named.find((one) => isCurrent(one, attributes)) ?? named[0] ?? null;
}

/** Whether the answer is about the block as it stands here: an older one is never shown as current. */
export function isCurrent(block: BlockState, attributes: BlockAttributes): boolean {
  return (
    stable(block.readingIds) === stable(attributes.readingIds) &&
    stable(block.settings) === stable(settingsOf(attributes))
  );
}

/** The same text for equal values, whatever the order of their names (the database sorts them). */
function stable(value: unknown): string {
  return JSON.stringify(value, (_key, one: unknown) =>
    one !== null && typeof one === 'object' && !Array.isArray(one)
      ? Object.fromEntries(Object.entries(one).sort(([a], [b]) => (a < b ? -1 : 1)))
      : one,
  );
}
