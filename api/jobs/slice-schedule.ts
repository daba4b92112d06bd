/** Aimed length of one batch: long enough that messages cost nothing, short enough that progress and stops are felt. */
const targetSeconds = 0.4;
/** Draws of the first batch, before anything is known of the pace. */
const firstBatch = 4;
/** A run takes a second thread once this much work is left. */
const worthSharingSeconds = 2;

export interface Slice {
  readonly level: number;
  readonly draws: readonly number[];
}

/** The draws of a job that are still to be computed, lowest noise first, cut in batches that follow the measured pace. */
export class SliceSchedule {
  private readonly missing: { level: number; draws: number[] }[] = [];
  private left = 0;
  private secondsPerDraw: number | null = null;

  /** @param done whether a draw is stored already */
  constructor(levels: number, draws: number, done: (level: number, draw: number) => boolean) {
    for (let level = 0; level < levels; level++) {
      const open: number[] = [];
      for (let draw = 0; draw < draws; draw++) if (!done(level, draw)) open.push(draw);
      if (open.length > 0) this.missing.push({ level, draws: open });
      this.left += open.length;
    }
  }

  get empty(): boolean {
    return this.left === 0;
  }
  get secondsLeft(): number | null {
    return this.secondsPerDraw === null ? null : this.secondsPerDraw * this.left;
  }
  get worthSharing(): boolean {
    return this.secondsPerDraw !== null && this.secondsPerDraw * this.left > worthSharingSeconds;
  }

  next(): Slice | undefined {
    const level = this.missing[0];
    if (!level) return undefined;
    const wanted = this.secondsPerDraw === null ? firstBatch : Math.max(1, Math.floor(targetSeconds / Math.max(this.secondsPerDraw, 1e-6)));
    const draws = level.draws.splice(0, wanted);
    if (level.draws.length === 0) this.missing.shift();
    this.left -= draws.length;
    return { level: level.level, draws };
  }

  /** Learns the pace; the newest batch weighs half. */
  finished(slice: Slice, seconds: number): void {
    if (slice.draws.length === 0) return;
    const pace = seconds / slice.draws.length;
    this.secondsPerDraw = this.secondsPerDraw === null ? pace : 0.5 * (this.secondsPerDraw + pace);
  }

  clear(): void {
    this.missing.length = 0;
    this.left = 0;
  }
}
