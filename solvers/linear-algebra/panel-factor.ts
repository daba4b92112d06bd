import { scratchWith, type Resident } from '../kernels/kernel-memory';
import type { Kernels } from '../kernels/web-assembly';
import { factorPanel, paddedHeight, subtractDescendant } from './panel-kernels';
import { backwardBlock, blockWidth, forwardBlock } from './panel-solve';
import type { CholeskyAnalysis } from './sparse-cholesky';

/** Which halves of a solution: A = (P^T L)(P^T L)^T. */
export type SolveHalf = 'both' | 'forward' | 'backward';

/** Addresses of the analysis in the memory of the compiled kernels. */
interface Layout {
  readonly first: number;
  readonly rowStart: number;
  readonly panelStart: number;
  readonly supernodeOf: number;
  readonly rowIndex: number;
}

/**
 * The panels of one factor. They stay in the memory of the compiled kernels until another factor needs the place; then they
 * are copied out once, and copied in again when they are asked for.
 */
export class PanelFactor implements Resident {
  readonly bytes: number;
  private readonly entries: number;
  private readonly longest: number;
  /** Null while the only copy is in the memory of the kernels. */
  private panels: Float64Array | null = null;
  private isReleased = false;

  constructor(private readonly analysis: CholeskyAnalysis) {
    const { panelStart, supernodes, rowStart, layout } = analysis;
    this.entries = panelStart[supernodes];
    // A tile may read three rows past the end of a panel.
    this.bytes = 8 * (this.entries + 4) + 4 * layout.length;
    let longest = 0;
    for (let s = 0; s < supernodes; s++) longest = Math.max(longest, rowStart[s + 1] - rowStart[s]);
    this.longest = longest;
  }

  get released(): boolean {
    return this.isReleased;
  }

  leave(from: ArrayBuffer, address: number): void {
    this.panels ??= new Float64Array(from, address, this.entries).slice();
  }

  /** The factor is not needed any more: nothing is copied out for it. */
  release(): void {
    this.isReleased = true;
    this.panels = null;
  }

  /**
   * The numeric factorisation of the matrix with these values.
   * @returns the first column whose pivot is not positive (in the order of elimination), or -1
   */
  factorise(values: Float64Array): number {
    const { n, supernodes, target } = this.analysis;
    const room = scratchWith(this, 4 * n, 4 * supernodes, 4 * supernodes, 4 * supernodes, 4 * this.longest);
    if (!room) {
      this.panels = new Float64Array(this.entries);
      for (let k = 0; k < target.length; k++) this.panels[target[k]] = values[k];
      return factoriseInTypeScript(this.analysis, this.panels, this.longest);
    }
    const layout = this.writeLayout(room.buffer, room.address);
    const panels = new Float64Array(room.buffer, room.address, this.entries + 4).fill(0);
    for (let k = 0; k < target.length; k++) panels[target[k]] = values[k];
    const [localRow, head, next, reached, places] = room.addresses;
    const failed = room.kernels.factorise(
      room.address, supernodes, layout.first, layout.rowStart, layout.rowIndex, layout.panelStart, layout.supernodeOf, localRow, head, next, reached, places,
    );
    if (failed >= 0) this.release();
    return failed;
  }

  /** Solves in place for k right-hand sides, n values each, one after another. */
  solve(b: Float64Array, k: number, half: SolveHalf): void {
    const { n, order } = this.analysis;
    if (this.released) throw new Error('This factor has been released.');
    if (b.length !== n * k) throw new RangeError(`The right-hand sides have ${b.length} values, not n k = ${n} x ${k}.`);
    const room = scratchWith(this, 8 * n * blockWidth, 32 * this.longest);
    let solveBlock: (x: Float64Array, count: number) => void;
    let x: Float64Array;
    if (room) {
      if (room.fresh) new Float64Array(room.buffer, room.address, this.entries).set(this.kept());
      const layout = room.fresh ? this.writeLayout(room.buffer, room.address) : this.layoutAt(room.address);
      x = new Float64Array(room.buffer, room.addresses[0], n * blockWidth);
      solveBlock = (_, count) => this.solveCompiled(room.kernels, room.address, layout, room.addresses[0], room.addresses[1], count, half);
    } else {
      const panels = this.kept();
      x = new Float64Array(n * blockWidth);
      solveBlock = (block, count) => {
        if (half !== 'backward') forwardBlock(this.analysis, panels, block, count);
        if (half !== 'forward') backwardBlock(this.analysis, panels, block, count);
      };
    }
    for (let from = 0; from < k; from += blockWidth) {
      const count = Math.min(blockWidth, k - from);
      // Four are solved together: what is beyond the last must not be rubbish that slows the arithmetic down.
      if (count < blockWidth) x.fill(0);
      const base = from * n;
      // The factor's own coordinates are the permuted ones; half a solve reads or leaves the vector there.
      interleave(b, base, n, count, half === 'backward' ? null : order, x);
      solveBlock(x, count);
      separate(x, b, base, n, count, half === 'forward' ? null : order);
    }
  }

  private solveCompiled(kernels: Kernels, panels: number, at: Layout, x: number, below: number, count: number, half: SolveHalf): void {
    const { supernodes } = this.analysis;
    const { first, rowStart, rowIndex, panelStart } = at;
    if (count > 4) {
      if (half !== 'backward') kernels.forwardEight(panels, supernodes, first, rowStart, rowIndex, panelStart, x);
      if (half !== 'forward') kernels.backwardEight(panels, supernodes, first, rowStart, rowIndex, panelStart, x);
    } else {
      if (half !== 'backward') kernels.forwardFour(panels, supernodes, first, rowStart, rowIndex, panelStart, x);
      if (half !== 'forward') kernels.backwardFour(panels, supernodes, first, rowStart, rowIndex, panelStart, x, below);
    }
  }

  private kept(): Float64Array {
    if (!this.panels) throw new Error('The factor was lost: it is neither in the memory of the kernels nor outside.');
    return this.panels;
  }

  private writeLayout(buffer: ArrayBuffer, address: number): Layout {
    new Int32Array(buffer, address + 8 * (this.entries + 4), this.analysis.layout.length).set(this.analysis.layout);
    return this.layoutAt(address);
  }

  private layoutAt(address: number): Layout {
    const { n, supernodes } = this.analysis;
    const first = address + 8 * (this.entries + 4);
    const rowStart = first + 4 * (supernodes + 1);
    const panelStart = rowStart + 4 * (supernodes + 1);
    const supernodeOf = panelStart + 4 * (supernodes + 1);
    return { first, rowStart, panelStart, supernodeOf, rowIndex: supernodeOf + 4 * n };
  }
}

/** x[8 i + r] = entry `order[i]` (or i) of right-hand side r. */
function interleave(b: Float64Array, base: number, n: number, count: number, order: Int32Array | null, x: Float64Array): void {
  for (let i = 0; i < n; i++) {
    let from = base + (order ? order[i] : i);
    const at = blockWidth * i;
    if (count === blockWidth) {
      x[at] = b[from];
      x[at + 1] = b[(from += n)];
      x[at + 2] = b[(from += n)];
      x[at + 3] = b[(from += n)];
      x[at + 4] = b[(from += n)];
      x[at + 5] = b[(from += n)];
      x[at + 6] = b[(from += n)];
      x[at + 7] = b[from + n];
    } else for (let r = 0; r < count; r++, from += n) x[at + r] = b[from];
  }
}

/** The way back. */
function separate(x: Float64Array, b: Float64Array, base: number, n: number, count: number, order: Int32Array | null): void {
  for (let i = 0; i < n; i++) {
    let to = base + (order ? order[i] : i);
    const at = blockWidth * i;
    if (count === blockWidth) {
      b[to] = x[at];
      b[(to += n)] = x[at + 1];
      b[(to += n)] = x[at + 2];
      b[(to += n)] = x[at + 3];
      b[(to += n)] = x[at + 4];
      b[(to += n)] = x[at + 5];
      b[(to += n)] = x[at + 6];
      b[to + n] = x[at + 7];
    } else for (let r = 0; r < count; r++, to += n) b[to] = x[at + r];
  }
}

/** The twin of the compiled `factorise`. */
function factoriseInTypeScript(analysis: CholeskyAnalysis, panels: Float64Array, longest: number): number {
  const { n, supernodes, first, rowStart, rowIndex, panelStart, supernodeOf } = analysis;
  const localRow = new Int32Array(n);
  const places = new Int32Array(longest);
  // Supernodes whose next untouched row lies in s are chained from head[s]; `reached` is that row's place in rowIndex.
  const head = new Int32Array(supernodes).fill(-1);
  const next = new Int32Array(supernodes).fill(-1);
  const reached = new Int32Array(supernodes);
  for (let s = 0; s < supernodes; s++) {
    const begin = first[s];
    const end = first[s + 1];
    const top = rowStart[s];
    const height = rowStart[s + 1] - top;
    for (let k = 0; k < height; k++) localRow[rowIndex[top + k]] = k;
    let descendant = head[s];
    while (descendant !== -1) {
      const following = next[descendant];
      const from = reached[descendant];
      const start = rowStart[descendant];
      const stop = rowStart[descendant + 1];
      let to = from;
      for (let k = from; k < stop; k++) {
        if (rowIndex[k] < end) to = k + 1;
        places[k - from] = localRow[rowIndex[k]];
      }
      const inner = first[descendant + 1] - first[descendant];
      const source = panelStart[descendant] + from - start;
      subtractDescendant(panels, source, paddedHeight(stop - start), inner, stop - from, to - from, places, panelStart[s], paddedHeight(height));
      if (to < stop) {
        reached[descendant] = to;
        const owner = supernodeOf[rowIndex[to]];
        next[descendant] = head[owner];
        head[owner] = descendant;
      }
      descendant = following;
    }
    const failed = factorPanel(panels, panelStart[s], end - begin, height);
    if (failed >= 0) return begin + failed;
    if (height > end - begin) {
      reached[s] = top + end - begin;
      const owner = supernodeOf[rowIndex[reached[s]]];
      next[s] = head[owner];
      head[owner] = s;
    }
  }
  return -1;
}
