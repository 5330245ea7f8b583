import { randomUUID } from 'node:crypto';
import type { Refusal } from '../editor/close-codes';
import { LIMITS } from './limits';

/** One update that waits to be stored. */
export interface PendingUpdate {
  readonly entryId: string;
  readonly epoch: number;
  readonly lock: number;
  readonly personId: string;
  readonly loginId: string;
  readonly client: number;
  readonly payload: Uint8Array;
  /** Told once, after COMMIT or after the refusal. */
  readonly done: (outcome: { seq: number } | { refused: Refusal | 'epoch' }) => void;
}

/** Updates of one account in one entry, in order: one call of append_updates, stored whole or not at all. */
export interface UpdateGroup {
  readonly batch: string;
  readonly updates: readonly PendingUpdate[];
}

export interface UpdateStore {
  /**
   * Stores groups in one transaction, in the given order.
   * @returns for each group its sequence numbers, or why it was refused.
   * @throws Error when nothing is known of the outcome; storing the same groups again is safe, because of their batch ids.
   */
  append(groups: readonly UpdateGroup[]): Promise<({ seqs: number[] } | { refused: Refusal | 'epoch' })[]>;
}

/** Pauses before a batch of unknown outcome is tried again, ms. After the last one it is refused. */
const RETRY_PAUSES_MS = [50, 150, 400, 1000, 2000, 3000];

/**
 * Natural group commit (integrity rule C3): no timer; while a commit is under way, arrivals wait and go together into the
 * next. Nothing is acknowledged or sent on before its commit.
 */
export class Flusher {
  private waiting: PendingUpdate[] = [];
  private running: Promise<void> | null = null;

  constructor(
    private readonly store: UpdateStore,
    private readonly pauses: readonly number[] = RETRY_PAUSES_MS,
  ) {}

  add(update: PendingUpdate): void {
    this.waiting.push(update);
    this.running ??= this.run();
  }

  /** Resolves when nothing waits any more. */
  async drain(): Promise<void> {
    while (this.running) await this.running;
  }

  private async run(): Promise<void> {
    try {
      while (this.waiting.length > 0) {
        const groups = groupUpdates(this.takeBatch());
        const outcomes = await this.append(groups);
        for (const [at, group] of groups.entries()) {
          const outcome = outcomes[at]!;
          for (const [i, update] of group.updates.entries()) {
            tell(update, 'seqs' in outcome ? { seq: outcome.seqs[i]! } : outcome);
          }
          if ('refused' in outcome) this.refuseBehind(group, outcome);
        }
      }
    } finally {
      // Here and not in a later turn: an update that comes in between would find a runner that has left.
      this.running = null;
    }
  }

  /** What waits may build on what was refused, and a row that builds on a missing one could never be replayed. */
  private refuseBehind(group: UpdateGroup, outcome: { refused: Refusal | 'epoch' }): void {
    const { entryId } = group.updates[0]!;
    const clients = new Set(group.updates.map((update) => update.client));
    const behind = this.waiting.filter((one) => one.entryId === entryId && clients.has(one.client));
    if (behind.length === 0) return;
    this.waiting = this.waiting.filter((one) => !behind.includes(one));
    for (const update of behind) tell(update, outcome);
  }

  private takeBatch(): PendingUpdate[] {
    let bytes = 0;
    let count = 0;
    const locks = new Map<string, string>();
    for (const update of this.waiting) {
      bytes += update.payload.length;
      if (count > 0 && bytes > LIMITS.batchBytes) break;
      // Under two locks of one entry, the later could be stored although the earlier was refused.
      const lock = `${update.epoch}/${update.lock}`;
      if ((locks.get(update.entryId) ?? lock) !== lock) break;
      locks.set(update.entryId, lock);
      count += 1;
    }
    return this.waiting.splice(0, count);
  }

  private async append(
    groups: readonly UpdateGroup[],
  ): Promise<({ seqs: number[] } | { refused: Refusal | 'epoch' })[]> {
    for (let attempt = 0; ; attempt++) {
      try {
        return await this.store.append(groups);
      } catch (error) {
        const pause = this.pauses[attempt];
        if (pause === undefined) {
          console.error(`updates could not be stored: ${(error as Error).message}`);
          return groups.map(() => ({ refused: 'storage' }));
        }
        await new Promise((resolve) => setTimeout(resolve, pause));
      }
    }
  }
}

/** A broken listener must not keep others from hearing of theirs. */
function tell(update: PendingUpdate, outcome: Parameters<PendingUpdate['done']>[0]): void {
  try {
    update.done(outcome);
  } catch (error) {
    console.error(`entry ${update.entryId}: an outcome could not be told: ${(error as Error).message}`);
  }
}

/**
 * By entry in ascending id, so that two servers lock in the same order; within an entry by account, each in the order of
 * arrival. Accounts cannot build on each other's text before it is committed, so their order among each other is free,
 * while an account's updates stand or fall together.
 */
export function groupUpdates(batch: readonly PendingUpdate[]): UpdateGroup[] {
  const groups = new Map<string, { batch: string; updates: PendingUpdate[] }>();
  for (const update of batch) {
    const { entryId, loginId, epoch, lock } = update;
    const key = [entryId, loginId, epoch, lock].join('/');
    const group = groups.get(key);
    if (group) group.updates.push(update);
    else groups.set(key, { batch: randomUUID(), updates: [update] });
  }
  const entryOf = (group: UpdateGroup) => group.updates[0]!.entryId;
  return [...groups.values()].sort((a, b) =>
    entryOf(a) < entryOf(b) ? -1 : entryOf(a) > entryOf(b) ? 1 : 0,
  );
}
