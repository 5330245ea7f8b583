/** An entry is not read again sooner than this: while people type, many commits make one reading. */
const REST_MS = 250;
const FIRST_PAUSE_MS = 1_000;
const LONGEST_PAUSE_MS = 60_000;

/**
 * Which entries are to be read, and when. An entry that is marked several times is read once; after a reading it rests a
 * little, and after a fault longer and longer, so that one broken entry neither fills the log nor holds up the others.
 */
export class DueEntries {
  private readonly due = new Set<string>();
  private readonly rests = new Map<string, { readonly until: number; readonly faults: number }>();

  constructor(private readonly now: () => number = Date.now) {}

  mark(entryId: string): void {
    this.due.add(entryId);
  }

  /** An entry that may be read now, no longer marked; null when there is none. */
  take(): string | null {
    for (const entryId of this.due) {
      if ((this.rests.get(entryId)?.until ?? 0) > this.now()) continue;
      this.due.delete(entryId);
      return entryId;
    }
    return null;
  }

  /** Milliseconds until the next marked entry may be read; null when none is marked. */
  nextInMs(): number | null {
    let soonest: number | null = null;
    for (const entryId of this.due) {
      const wait = Math.max(0, (this.rests.get(entryId)?.until ?? 0) - this.now());
      soonest = soonest === null ? wait : Math.min(soonest, wait);
    }
    return soonest;
  }

  /** Says how reading an entry went. */
  done(entryId: string, fault: boolean): void {
    const faults = fault ? (this.rests.get(entryId)?.faults ?? 0) + 1 : 0;
    const pause = fault ? Math.min(LONGEST_PAUSE_MS, FIRST_PAUSE_MS * 2 ** (faults - 1)) : REST_MS;
    this.rests.set(entryId, { until: this.now() + pause, faults });
    this.forgetRested();
  }

  /** What failed may be read at once: the fault lay elsewhere, and is mended. */
  forgetFaults(): void {
    for (const [entryId, { faults }] of this.rests) if (faults > 0) this.rests.delete(entryId);
  }

  private forgetRested(): void {
    if (this.rests.size < 1000) return;
    for (const [entryId, { until, faults }] of this.rests) {
      if (faults === 0 && until <= this.now()) this.rests.delete(entryId);
    }
  }
}
