// The triangular solutions of cholesky.as for all eight interleaved right-hand sides at once: the same sums, two rows or two
// columns of the factor at a time, without going through the tile.

// @ts-ignore: decorator
@inline
function int(base: usize, index: i32): i32 {
  return i32.load(base + (<usize>index << 2));
}

// @ts-ignore: decorator
@inline
function subtract(x: usize, s0: v128, s1: v128, s2: v128, s3: v128): void {
  v128.store(x, f64x2.sub(v128.load(x), s0));
  v128.store(x, f64x2.sub(v128.load(x, 16), s1), 16);
  v128.store(x, f64x2.sub(v128.load(x, 32), s2), 32);
  v128.store(x, f64x2.sub(v128.load(x, 48), s3), 48);
}

// @ts-ignore: decorator
@inline
function finish(x: usize, s0: v128, s1: v128, s2: v128, s3: v128, pivot: v128): void {
  v128.store(x, f64x2.div(f64x2.sub(v128.load(x), s0), pivot));
  v128.store(x, f64x2.div(f64x2.sub(v128.load(x, 16), s1), pivot), 16);
  v128.store(x, f64x2.div(f64x2.sub(v128.load(x, 32), s2), pivot), 32);
  v128.store(x, f64x2.div(f64x2.sub(v128.load(x, 48), s3), pivot), 48);
}

/** L y = b in place. */
export function forwardEight(panels: usize, supernodes: i32, first: usize, rowStart: usize, rowIndex: usize, panelStart: usize, x: usize): void {
  const zero = f64x2.splat(0);
  for (let s = 0; s < supernodes; s++) {
    const begin = int(first, s);
    const width = int(first, s + 1) - begin;
    const top = int(rowStart, s);
    const height = int(rowStart, s + 1) - top;
    const panel = panels + (<usize>int(panelStart, s) << 3);
    const stride = <usize>((height + 3) & ~3) << 3;
    const own = x + (<usize>begin << 6);
    for (let i = 0; i < height; i += 2) {
      // The second of the two rows may be the one past the end: it is not stored then.
      const inner = min(i, width);
      let at = own;
      let entry = panel + (<usize>i << 3);
      let p0 = zero, p1 = zero, p2 = zero, p3 = zero, q0 = zero, q1 = zero, q2 = zero, q3 = zero;
      for (let k = 0; k < inner; k++) {
        const l = v128.load_splat<f64>(entry);
        const m = v128.load_splat<f64>(entry, 8);
        const x0 = v128.load(at), x1 = v128.load(at, 16), x2 = v128.load(at, 32), x3 = v128.load(at, 48);
        p0 = f64x2.add(p0, f64x2.mul(l, x0));
        p1 = f64x2.add(p1, f64x2.mul(l, x1));
        p2 = f64x2.add(p2, f64x2.mul(l, x2));
        p3 = f64x2.add(p3, f64x2.mul(l, x3));
        q0 = f64x2.add(q0, f64x2.mul(m, x0));
        q1 = f64x2.add(q1, f64x2.mul(m, x1));
        q2 = f64x2.add(q2, f64x2.mul(m, x2));
        q3 = f64x2.add(q3, f64x2.mul(m, x3));
        at += 64;
        entry += stride;
      }
      if (i < width) {
        finish(at, p0, p1, p2, p3, v128.load_splat<f64>(entry));
        const m = v128.load_splat<f64>(entry, 8);
        q0 = f64x2.add(q0, f64x2.mul(m, v128.load(at)));
        q1 = f64x2.add(q1, f64x2.mul(m, v128.load(at, 16)));
        q2 = f64x2.add(q2, f64x2.mul(m, v128.load(at, 32)));
        q3 = f64x2.add(q3, f64x2.mul(m, v128.load(at, 48)));
        if (i + 1 < width) finish(at + 64, q0, q1, q2, q3, v128.load_splat<f64>(entry + stride, 8));
        else if (i + 1 < height) subtract(x + (<usize>int(rowIndex, top + i + 1) << 6), q0, q1, q2, q3);
      } else {
        subtract(x + (<usize>int(rowIndex, top + i) << 6), p0, p1, p2, p3);
        if (i + 1 < height) subtract(x + (<usize>int(rowIndex, top + i + 1) << 6), q0, q1, q2, q3);
      }
    }
  }
}

/** L^T x = y in place. */
export function backwardEight(panels: usize, supernodes: i32, first: usize, rowStart: usize, rowIndex: usize, panelStart: usize, x: usize): void {
  const zero = f64x2.splat(0);
  for (let s = supernodes - 1; s >= 0; s--) {
    const begin = int(first, s);
    const width = int(first, s + 1) - begin;
    const top = int(rowStart, s);
    const height = int(rowStart, s + 1) - top;
    const panel = panels + (<usize>int(panelStart, s) << 3);
    const stride = <usize>((height + 3) & ~3) << 3;
    const own = x + (<usize>begin << 6);
    const bottom = rowIndex + (<usize>(top + height) << 2);
    // Columns k and k - 1; the lowest stands alone when their number is odd.
    for (let k = width - 1; k >= 0; k -= 2) {
      const pair = k > 0;
      const column = panel + <usize>k * stride;
      const before = pair ? column - stride : column;
      let p0 = zero, p1 = zero, p2 = zero, p3 = zero, q0 = zero, q1 = zero, q2 = zero, q3 = zero;
      let offset = <usize>width << 3;
      for (let row = rowIndex + (<usize>(top + width) << 2); row < bottom; row += 4) {
        const at = x + (<usize>i32.load(row) << 6);
        const l = v128.load_splat<f64>(column + offset);
        const m = v128.load_splat<f64>(before + offset);
        const x0 = v128.load(at), x1 = v128.load(at, 16), x2 = v128.load(at, 32), x3 = v128.load(at, 48);
        p0 = f64x2.add(p0, f64x2.mul(l, x0));
        p1 = f64x2.add(p1, f64x2.mul(l, x1));
        p2 = f64x2.add(p2, f64x2.mul(l, x2));
        p3 = f64x2.add(p3, f64x2.mul(l, x3));
        q0 = f64x2.add(q0, f64x2.mul(m, x0));
        q1 = f64x2.add(q1, f64x2.mul(m, x1));
        q2 = f64x2.add(q2, f64x2.mul(m, x2));
        q3 = f64x2.add(q3, f64x2.mul(m, x3));
        offset += 8;
      }
      offset = <usize>(width - 1) << 3;
      let at = own + (<usize>(width - 1) << 6);
      for (let i = width - 1; i > k; i--) {
        const l = v128.load_splat<f64>(column + offset);
        const m = v128.load_splat<f64>(before + offset);
        const x0 = v128.load(at), x1 = v128.load(at, 16), x2 = v128.load(at, 32), x3 = v128.load(at, 48);
        p0 = f64x2.add(p0, f64x2.mul(l, x0));
        p1 = f64x2.add(p1, f64x2.mul(l, x1));
        p2 = f64x2.add(p2, f64x2.mul(l, x2));
        p3 = f64x2.add(p3, f64x2.mul(l, x3));
        q0 = f64x2.add(q0, f64x2.mul(m, x0));
        q1 = f64x2.add(q1, f64x2.mul(m, x1));
        q2 = f64x2.add(q2, f64x2.mul(m, x2));
        q3 = f64x2.add(q3, f64x2.mul(m, x3));
        offset -= 8;
        at -= 64;
      }
      finish(at, p0, p1, p2, p3, v128.load_splat<f64>(column + offset));
      if (pair) {
        const m = v128.load_splat<f64>(before + offset);
        q0 = f64x2.add(q0, f64x2.mul(m, v128.load(at)));
        q1 = f64x2.add(q1, f64x2.mul(m, v128.load(at, 16)));
        q2 = f64x2.add(q2, f64x2.mul(m, v128.load(at, 32)));
        q3 = f64x2.add(q3, f64x2.mul(m, v128.load(at, 48)));
        finish(at - 64, q0, q1, q2, q3, v128.load_splat<f64>(before + offset - 8));
      }
    }
  }
}
