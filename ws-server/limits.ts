/** Bounds of one server (integrity rule C10): what has no bound finds one at the worst hour. */
export const LIMITS = {
  messageBytes: 1024 * 1024,
  /** Length of new content in one frame, in Yjs clock ticks. */
  frameLength: 1_000_000,
  messagesPerSecond: 50,
  messageBurst: 200,
  socketsPerAccount: 20,
  awarenessBytes: 4096,
  awarenessPerSecond: 10,
  bufferedBytes: 4 * 1024 * 1024,
  pingMs: 20_000,
  recheckMs: 30_000,
  tailMs: 2_000,
  batchBytes: 64 * 1024,
} as const;

/** A bucket that refills steadily: `take` says whether one more message may pass. */
export class TokenBucket {
  private tokens: number;
  private filledAt: number;

  constructor(
    private readonly perSecond: number,
    private readonly burst: number,
    private readonly now: () => number = () => performance.now(),
  ) {
    this.tokens = burst;
    this.filledAt = now();
  }

  take(): boolean {
    const at = this.now();
    this.tokens = Math.min(this.burst, this.tokens + ((at - this.filledAt) / 1000) * this.perSecond);
    this.filledAt = at;
    if (this.tokens < 1) return false;
    this.tokens -= 1;
    return true;
  }
}
