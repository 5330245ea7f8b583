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

/** Updates of one account in one entry, in order: one call of append_updates. */
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
            update.done('seqs' in outcome ? { seq: outcome.seqs[i]! } : outcome);
          }
        }
      }
    } finally {
      // Here and not in a later turn: an update that comes in between would find a runner that has left.
      this.running = null;
    }
  }

  private takeBatch(): PendingUpdate[] {
    let bytes = 0;
    let count = 0;
    while (
      count < this.waiting.length &&
      (count === 0 || bytes + this.waiting[count]!.payload.length <= LIMITS.batchBytes)
    ) {
      bytes += this.waiting[count]!.payload.length;
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

/** By entry in ascending id (so that two servers lock in the same order), within an entry by runs of one account. */
export function groupUpdates(batch: readonly PendingUpdate[]): UpdateGroup[] {
  const sorted = batch
    .map((update, at) => ({ update, at }))
    .sort((a, b) =>
      a.update.entryId < b.update.entryId ? -1 : a.update.entryId > b.update.entryId ? 1 : a.at - b.at,
    )
    .map(({ update }) => update);
  const groups: { batch: string; updates: PendingUpdate[] }[] = [];
  for (const update of sorted) {
    const last = groups.at(-1)?.updates[0];
    const same =
      last &&
      last.entryId === update.entryId &&
      last.loginId === update.loginId &&
      last.epoch === update.epoch &&
      last.lock === update.lock;
    if (same) groups.at(-1)!.updates.push(update);
    else groups.push({ batch: randomUUID(), updates: [update] });
  }
  return groups;
}
