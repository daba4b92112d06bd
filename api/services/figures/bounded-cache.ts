/** Keeps what was used last, up to a number of entries. Values are immutable, so an entry never goes stale: its key says what it is of. */
export class BoundedCache<V> {
  private readonly entries = new Map<string, V>();
  constructor(private readonly capacity: number) {}

  get(key: string): V | undefined {
    const value = this.entries.get(key);
    if (value === undefined) return undefined;
    // A Map keeps the order of insertion: the oldest use comes first.
    this.entries.delete(key);
    this.entries.set(key, value);
    return value;
  }

  set(key: string, value: V): V {
    this.entries.delete(key);
    this.entries.set(key, value);
    if (this.entries.size > this.capacity) {
      const oldest = this.entries.keys().next();
      if (!oldest.done) this.entries.delete(oldest.value);
    }
    return value;
  }

  get size(): number {
    return this.entries.size;
  }
}
