// Products of vectors. A sum over a vector has four parts, one for each index modulo four, added as (0 + 2) + (1 + 3).

// @ts-ignore: decorator
@inline
function total(even: v128, odd: v128): f64 {
  const pair = f64x2.add(even, odd);
  return f64x2.extract_lane(pair, 0) + f64x2.extract_lane(pair, 1);
}

/** The entries that are left over after the fours: entry k goes to part k. */
function rest(a: usize, b: usize, count: i32): v128 {
  const p = f64.load(a) * f64.load(b);
  return count > 1 ? f64x2.replace_lane(f64x2.splat(p), 1, f64.load(a, 8) * f64.load(b, 8)) : f64x2.replace_lane(f64x2.splat(0), 0, p);
}

/** sum of a[k] b[k] */
export function dot(a: usize, b: usize, count: i32): f64 {
  let s0 = f64x2.splat(0), s1 = f64x2.splat(0);
  let k = 0;
  for (; k + 4 <= count; k += 4) {
    s0 = f64x2.add(s0, f64x2.mul(v128.load(a), v128.load(b)));
    s1 = f64x2.add(s1, f64x2.mul(v128.load(a, 16), v128.load(b, 16)));
    a += 32;
    b += 32;
  }
  if (k < count) s0 = f64x2.add(s0, rest(a, b, count - k));
  if (k + 2 < count) s1 = f64x2.add(s1, f64x2.replace_lane(f64x2.splat(0), 0, f64.load(a, 16) * f64.load(b, 16)));
  return total(s0, s1);
}

/** y[k] += alpha x[k] */
export function addScaled(alpha: f64, x: usize, y: usize, count: i32): void {
  const factor = f64x2.splat(alpha);
  let k = 0;
  for (; k + 2 <= count; k += 2) {
    v128.store(y, f64x2.add(v128.load(y), f64x2.mul(factor, v128.load(x))));
    x += 16;
    y += 16;
  }
  if (k < count) f64.store(y, f64.load(y) + alpha * f64.load(x));
}

/** out[i] = sum over k of a[i, k] x[k]; `stride` bytes a row */
export function rowsTimes(a: usize, stride: usize, rows: i32, cols: i32, x: usize, out: usize): void {
  let i = 0;
  for (; i + 4 <= rows; i += 4) {
    const a1 = a + stride;
    const a2 = a1 + stride;
    const a3 = a2 + stride;
    let s00 = f64x2.splat(0), s01 = s00, s10 = s00, s11 = s00, s20 = s00, s21 = s00, s30 = s00, s31 = s00;
    let at: usize = 0;
    let k = 0;
    for (; k + 4 <= cols; k += 4) {
      const p = v128.load(x + at);
      const q = v128.load(x + at, 16);
      s00 = f64x2.add(s00, f64x2.mul(v128.load(a + at), p));
      s01 = f64x2.add(s01, f64x2.mul(v128.load(a + at, 16), q));
      s10 = f64x2.add(s10, f64x2.mul(v128.load(a1 + at), p));
      s11 = f64x2.add(s11, f64x2.mul(v128.load(a1 + at, 16), q));
      s20 = f64x2.add(s20, f64x2.mul(v128.load(a2 + at), p));
      s21 = f64x2.add(s21, f64x2.mul(v128.load(a2 + at, 16), q));
      s30 = f64x2.add(s30, f64x2.mul(v128.load(a3 + at), p));
      s31 = f64x2.add(s31, f64x2.mul(v128.load(a3 + at, 16), q));
      at += 32;
    }
    const left = cols - k;
    if (left > 0) {
      s00 = f64x2.add(s00, rest(a + at, x + at, left));
      s10 = f64x2.add(s10, rest(a1 + at, x + at, left));
      s20 = f64x2.add(s20, rest(a2 + at, x + at, left));
      s30 = f64x2.add(s30, rest(a3 + at, x + at, left));
    }
    if (left > 2) {
      const zero = f64x2.splat(0);
      const q = f64.load(x + at, 16);
      s01 = f64x2.add(s01, f64x2.replace_lane(zero, 0, f64.load(a + at, 16) * q));
      s11 = f64x2.add(s11, f64x2.replace_lane(zero, 0, f64.load(a1 + at, 16) * q));
      s21 = f64x2.add(s21, f64x2.replace_lane(zero, 0, f64.load(a2 + at, 16) * q));
      s31 = f64x2.add(s31, f64x2.replace_lane(zero, 0, f64.load(a3 + at, 16) * q));
    }
    f64.store(out, total(s00, s01));
    f64.store(out, total(s10, s11), 8);
    f64.store(out, total(s20, s21), 16);
    f64.store(out, total(s30, s31), 24);
    out += 32;
    a = a3 + stride;
  }
  for (; i < rows; i++) {
    f64.store(out, dot(a, x, cols));
    out += 8;
    a += stride;
  }
}

/** out[k] = sum over i of x[i] a[i, k], i ascending from zero */
export function timesRows(a: usize, stride: usize, rows: i32, cols: i32, x: usize, out: usize): void {
  memory.fill(out, 0, <usize>cols << 3);
  let i = 0;
  for (; i + 4 <= rows; i += 4) {
    const a1 = a + stride;
    const a2 = a1 + stride;
    const a3 = a2 + stride;
    const p0 = v128.load_splat<f64>(x), p1 = v128.load_splat<f64>(x, 8), p2 = v128.load_splat<f64>(x, 16), p3 = v128.load_splat<f64>(x, 24);
    let at: usize = 0;
    let k = 0;
    for (; k + 2 <= cols; k += 2) {
      let s = f64x2.add(v128.load(out + at), f64x2.mul(p0, v128.load(a + at)));
      s = f64x2.add(s, f64x2.mul(p1, v128.load(a1 + at)));
      s = f64x2.add(s, f64x2.mul(p2, v128.load(a2 + at)));
      v128.store(out + at, f64x2.add(s, f64x2.mul(p3, v128.load(a3 + at))));
      at += 16;
    }
    if (k < cols) {
      let s = f64.load(out + at) + f64.load(x) * f64.load(a + at);
      s += f64.load(x, 8) * f64.load(a1 + at);
      s += f64.load(x, 16) * f64.load(a2 + at);
      f64.store(out + at, s + f64.load(x, 24) * f64.load(a3 + at));
    }
    x += 32;
    a = a3 + stride;
  }
  for (; i < rows; i++) {
    addScaled(f64.load(x), a, out, cols);
    x += 8;
    a += stride;
  }
}
