/** Columns of numbers that grow block by block: a plain list of numbers costs several times as much memory. */

const BLOCK = 65_536;

export class GrowingFloats {
  private readonly full: Float64Array[] = [];
  private last = new Float64Array(BLOCK);
  private used = 0;

  get length(): number {
    return this.full.length * BLOCK + this.used;
  }

  push(value: number): void {
    if (this.used === BLOCK) {
      this.full.push(this.last);
      this.last = new Float64Array(BLOCK);
      this.used = 0;
    }
    this.last[this.used] = value;
    this.used += 1;
  }

  /** All values in one array. The blocks are given up, so that not everything is held twice. */
  take(): Float64Array {
    const all = new Float64Array(this.length);
    let at = 0;
    for (let block = this.full.shift(); block; block = this.full.shift()) {
      all.set(block, at);
      at += BLOCK;
    }
    all.set(this.last.subarray(0, this.used), at);
    this.used = 0;
    return all;
  }
}
