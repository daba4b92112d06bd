/** Points within `reach` of the origin (farther ones are slower, not wrong) in a uniform grid of linked lists, for 'is anything nearer than r' questions. */
export class PointBuckets {
  private readonly side = 128;
  private readonly cell: number;
  private readonly head = new Int32Array(128 * 128).fill(-1);
  private next = new Int32Array(4096);
  x = new Float64Array(4096);
  y = new Float64Array(4096);
  /** Wanted size at the point. */
  size = new Float64Array(4096);
  count = 0;

  constructor(private readonly reach: number) {
    this.cell = (2 * reach) / 128;
  }

  add(x: number, y: number, size: number): number {
    if (this.count === this.x.length) this.grow();
    const i = this.count++;
    this.x[i] = x;
    this.y[i] = y;
    this.size[i] = size;
    const cell = this.index(y) * this.side + this.index(x);
    this.next[i] = this.head[cell];
    this.head[cell] = i;
    return i;
  }

  /** True when a point lies closer to (x, y) than `factor` times the mean of its size and `size`. */
  crowded(x: number, y: number, size: number, factor: number): boolean {
    // Sizes of neighbours closer than this reach are at most about twice `size` by the grading.
    const reach = factor * 1.5 * size;
    const i0 = this.index(x - reach);
    const i1 = this.index(x + reach);
    const j0 = this.index(y - reach);
    const j1 = this.index(y + reach);
    for (let j = j0; j <= j1; j++) {
      for (let i = i0; i <= i1; i++) {
        for (let p = this.head[j * this.side + i]; p >= 0; p = this.next[p]) {
          const dx = this.x[p] - x;
          const dy = this.y[p] - y;
          const limit = 0.5 * factor * (size + this.size[p]);
          if (dx * dx + dy * dy < limit * limit) return true;
        }
      }
    }
    return false;
  }

  private index(v: number): number {
    const i = Math.floor((v + this.reach) / this.cell);
    return i < 0 ? 0 : i >= this.side ? this.side - 1 : i;
  }

  private grow(): void {
    const length = this.x.length * 2;
    const wider = (old: Float64Array): Float64Array<ArrayBuffer> => {
      const a = new Float64Array(length);
      a.set(old);
      return a;
    };
    this.x = wider(this.x);
    this.y = wider(this.y);
    this.size = wider(this.size);
    const next = new Int32Array(length);
    next.set(this.next);
    this.next = next;
  }
}
