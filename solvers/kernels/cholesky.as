// The left-looking supernodal Cholesky factorisation and its triangular solutions (layout: ../linear-algebra/sparse-cholesky.ts).
// A panel is column-major; a column has `stride` doubles, the panel's height rounded up to a multiple of four, the rest zero.
import { accumulate, clearTile, tile } from './tile';

/** Columns of a panel are finished in blocks of this many. */
const columnBlock = 16;

// @ts-ignore: decorator
@inline
function int(base: usize, index: i32): i32 {
  return i32.load(base + (<usize>index << 2));
}

// @ts-ignore: decorator
@inline
function padded(height: i32): usize {
  return <usize>((height + 3) & ~3);
}

/**
 * Takes the products of a descendant's rows from the panel it reaches.
 * @param source its entry (first of `rows`, column 0), `inner` columns of `strideS` bytes; the first `columns` rows are columns of the target
 * @param places row of the target panel for each of the rows
 */
function subtractDescendant(source: usize, strideS: usize, inner: i32, rows: i32, columns: i32, places: usize, target: usize, strideT: usize): void {
  for (let j = 0; j < columns; j += 4) {
    const wide = min(4, columns - j);
    const right = source + (<usize>j << 3);
    for (let i = j; i < rows; i += 4) {
      clearTile();
      accumulate(right, 8, strideS, source + (<usize>i << 3), strideS, inner);
      const first = int(places, i);
      if (i + 4 <= rows && int(places, i + 3) - first == 3) {
        for (let c = 0; c < wide; c++) {
          const at = target + <usize>int(places, j + c) * strideT + (<usize>first << 3);
          const sums = tile + (<usize>c << 5);
          v128.store(at, f64x2.sub(v128.load(at), v128.load(sums)));
          v128.store(at, f64x2.sub(v128.load(at, 16), v128.load(sums, 16)), 16);
        }
      } else {
        const deep = min(4, rows - i);
        for (let c = 0; c < wide; c++) {
          const column = target + <usize>int(places, j + c) * strideT;
          const sums = tile + (<usize>c << 5);
          for (let r = 0; r < deep; r++) {
            const at = column + (<usize>int(places, i + r) << 3);
            f64.store(at, f64.load(at) - f64.load(sums + (<usize>r << 3)));
          }
        }
      }
    }
  }
}

/** Columns from .. to of the rows from `from` on lose the products of the columns before. */
function subtractEarlier(panel: usize, stride: usize, height: i32, from: i32, to: i32): void {
  for (let j = from; j < to; j += 4) {
    const wide = min(4, to - j);
    for (let i = j; i < height; i += 4) {
      clearTile();
      accumulate(panel + (<usize>j << 3), 8, stride, panel + (<usize>i << 3), stride, from);
      for (let c = 0; c < wide; c++) {
        const at = panel + <usize>(j + c) * stride + (<usize>i << 3);
        const sums = tile + (<usize>c << 5);
        v128.store(at, f64x2.sub(v128.load(at), v128.load(sums)));
        v128.store(at, f64x2.sub(v128.load(at, 16), v128.load(sums, 16)), 16);
      }
    }
  }
}

/**
 * Factorises a panel in place; above the diagonal it leaves what it likes.
 * @returns the first column whose pivot is not positive, or -1
 */
export function factorPanel(panel: usize, width: i32, height: i32): i32 {
  const stride = padded(height) << 3;
  for (let from = 0; from < width; from += columnBlock) {
    const to = min(from + columnBlock, width);
    if (from > 0) subtractEarlier(panel, stride, height, from, to);
    for (let j = from; j < to; j++) {
      const column = panel + <usize>j * stride;
      // The rows of the four that hold the diagonal come first: their pivot scales the rest.
      let root: f64 = 1;
      let inverse = f64x2.splat(1);
      for (let i = j & ~3; i < height; i += 4) {
        let at = panel + <usize>from * stride + (<usize>i << 3);
        let factor = panel + <usize>from * stride + (<usize>j << 3);
        const own = column + (<usize>i << 3);
        let v0 = v128.load(own), v1 = v128.load(own, 16);
        while (factor < column) {
          const q = v128.load_splat<f64>(factor);
          v0 = f64x2.sub(v0, f64x2.mul(q, v128.load(at)));
          v1 = f64x2.sub(v1, f64x2.mul(q, v128.load(at, 16)));
          at += stride;
          factor += stride;
        }
        if (i <= j) {
          v128.store(own, v0);
          v128.store(own, v1, 16);
          const pivot = f64.load(column + (<usize>j << 3));
          if (!(pivot > 0) || pivot == Infinity) return j;
          root = sqrt(pivot);
          inverse = f64x2.splat(1 / root);
        }
        v128.store(own, f64x2.mul(v0, inverse));
        v128.store(own, f64x2.mul(v1, inverse), 16);
        if (i <= j) f64.store(column + (<usize>j << 3), root);
      }
    }
  }
  return -1;
}

/**
 * The numeric factorisation.
 * @param panels holds the matrix; all other pointers are 32-bit integers: supernodes + 1 or n as in the analysis, then scratch
 * @param panelStart in doubles
 * @param localRow n
 * @param places as many as the longest panel has rows
 * @returns the first column whose pivot is not positive, or -1
 */
export function factorise(
  panels: usize, supernodes: i32, first: usize, rowStart: usize, rowIndex: usize, panelStart: usize, supernodeOf: usize,
  localRow: usize, head: usize, next: usize, reached: usize, places: usize,
): i32 {
  for (let s = 0; s < supernodes; s++) i32.store(head + (<usize>s << 2), -1);
  for (let s = 0; s < supernodes; s++) {
    const begin = int(first, s);
    const end = int(first, s + 1);
    const width = end - begin;
    const top = int(rowStart, s);
    const height = int(rowStart, s + 1) - top;
    const panel = panels + (<usize>int(panelStart, s) << 3);
    const stride = padded(height) << 3;
    for (let k = 0; k < height; k++) i32.store(localRow + (<usize>int(rowIndex, top + k) << 2), k);
    let descendant = int(head, s);
    while (descendant != -1) {
      const following = int(next, descendant);
      const from = int(reached, descendant);
      const start = int(rowStart, descendant);
      const stop = int(rowStart, descendant + 1);
      let to = from;
      for (let k = from; k < stop; k++) {
        const row = int(rowIndex, k);
        if (row < end) to = k + 1;
        i32.store(places + (<usize>(k - from) << 2), int(localRow, row));
      }
      const source = panels + (<usize>(int(panelStart, descendant) + from - start) << 3);
      subtractDescendant(source, padded(stop - start) << 3, int(first, descendant + 1) - int(first, descendant), stop - from, to - from, places, panel, stride);
      if (to < stop) {
        i32.store(reached + (<usize>descendant << 2), to);
        const owner = <usize>int(supernodeOf, int(rowIndex, to)) << 2;
        i32.store(next + (<usize>descendant << 2), i32.load(head + owner));
        i32.store(head + owner, descendant);
      }
      descendant = following;
    }
    const failed = factorPanel(panel, width, height);
    if (failed >= 0) return begin + failed;
    if (height > width) {
      i32.store(reached + (<usize>s << 2), top + width);
      const owner = <usize>int(supernodeOf, int(rowIndex, top + width)) << 2;
      i32.store(next + (<usize>s << 2), i32.load(head + owner));
      i32.store(head + owner, s);
    }
  }
  return -1;
}

/** Four right-hand sides of one unknown: x = (x - sum) / pivot. */
// @ts-ignore: decorator
@inline
function finish(x: usize, s0: v128, s1: v128, pivot: v128): void {
  v128.store(x, f64x2.div(f64x2.sub(v128.load(x), s0), pivot));
  v128.store(x, f64x2.div(f64x2.sub(v128.load(x, 16), s1), pivot), 16);
}

/** L y = b in place for four of the eight interleaved right-hand sides; `x` points at the first of them. */
export function forwardFour(panels: usize, supernodes: i32, first: usize, rowStart: usize, rowIndex: usize, panelStart: usize, x: usize): void {
  for (let s = 0; s < supernodes; s++) {
    const begin = int(first, s);
    const width = int(first, s + 1) - begin;
    const top = int(rowStart, s);
    const height = int(rowStart, s + 1) - top;
    const panel = panels + (<usize>int(panelStart, s) << 3);
    const stride = padded(height) << 3;
    const own = x + (<usize>begin << 6);
    for (let i = 0; i < width; i++) {
      let s0 = f64x2.splat(0), s1 = f64x2.splat(0);
      let at = own;
      let entry = panel + (<usize>i << 3);
      for (let k = 0; k < i; k++) {
        const l = v128.load_splat<f64>(entry);
        s0 = f64x2.add(s0, f64x2.mul(l, v128.load(at)));
        s1 = f64x2.add(s1, f64x2.mul(l, v128.load(at, 16)));
        at += 64;
        entry += stride;
      }
      finish(at, s0, s1, v128.load_splat<f64>(entry));
    }
    for (let i = width; i < height; i += 4) {
      clearTile();
      accumulate(panel + (<usize>i << 3), 8, stride, own, 64, width);
      const deep = min(4, height - i);
      for (let r = 0; r < deep; r++) {
        const at = x + (<usize>int(rowIndex, top + i + r) << 6);
        const sums = tile + (<usize>r << 5);
        v128.store(at, f64x2.sub(v128.load(at), v128.load(sums)));
        v128.store(at, f64x2.sub(v128.load(at, 16), v128.load(sums, 16)), 16);
      }
    }
  }
}

/**
 * L^T x = y in place for four of the eight interleaved right-hand sides. Every sum runs over the rows below the diagonal
 * block in ascending order, then over those of the block in descending order.
 * @param below scratch, 32 bytes for each row of the longest panel
 */
export function backwardFour(panels: usize, supernodes: i32, first: usize, rowStart: usize, rowIndex: usize, panelStart: usize, x: usize, below: usize): void {
  for (let s = supernodes - 1; s >= 0; s--) {
    const begin = int(first, s);
    const width = int(first, s + 1) - begin;
    const top = int(rowStart, s);
    const height = int(rowStart, s + 1) - top;
    const panel = panels + (<usize>int(panelStart, s) << 3);
    const stride = padded(height) << 3;
    const own = x + (<usize>begin << 6);
    for (let i = width; i < height; i++) {
      const at = x + (<usize>int(rowIndex, top + i) << 6);
      const out = below + (<usize>(i - width) << 5);
      v128.store(out, v128.load(at));
      v128.store(out, v128.load(at, 16), 16);
    }
    for (let end = width; end > 0; ) {
      const begins = (end - 1) & ~3;
      clearTile();
      accumulate(panel + <usize>begins * stride + (<usize>width << 3), stride, 8, below, 32, height - width);
      for (let k = end - 1; k >= begins; k--) {
        const sums = tile + (<usize>(k - begins) << 5);
        let s0 = v128.load(sums), s1 = v128.load(sums, 16);
        const column = panel + <usize>k * stride;
        let at = own + (<usize>(width - 1) << 6);
        let entry = column + (<usize>(width - 1) << 3);
        for (let i = width - 1; i > k; i--) {
          const l = v128.load_splat<f64>(entry);
          s0 = f64x2.add(s0, f64x2.mul(l, v128.load(at)));
          s1 = f64x2.add(s1, f64x2.mul(l, v128.load(at, 16)));
          at -= 64;
          entry -= 8;
        }
        finish(at, s0, s1, v128.load_splat<f64>(entry));
      }
      end = begins;
    }
  }
}
