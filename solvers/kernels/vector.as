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

/** out = A x for compressed sparse rows; every row is summed in the order of its entries, four rows at a time. */
export function sparseRows(rows: i32, rowStart: usize, columns: usize, values: usize, x: usize, out: usize): void {
  let i = 0;
  for (; i + 4 <= rows; i += 4) {
    let k0 = i32.load(rowStart), k1 = i32.load(rowStart, 4), k2 = i32.load(rowStart, 8), k3 = i32.load(rowStart, 12);
    const e0 = k1, e1 = k2, e2 = k3, e3 = i32.load(rowStart, 16);
    const common = min(min(e0 - k0, e1 - k1), min(e2 - k2, e3 - k3));
    let s0: f64 = 0, s1: f64 = 0, s2: f64 = 0, s3: f64 = 0;
    let c0 = columns + (<usize>k0 << 2), c1 = columns + (<usize>k1 << 2), c2 = columns + (<usize>k2 << 2), c3 = columns + (<usize>k3 << 2);
    let v0 = values + (<usize>k0 << 3), v1 = values + (<usize>k1 << 3), v2 = values + (<usize>k2 << 3), v3 = values + (<usize>k3 << 3);
    const end = c0 + (<usize>(common & ~3) << 2);
    while (c0 < end) {
      s0 += f64.load(v0) * f64.load(x + (<usize>i32.load(c0) << 3));
      s1 += f64.load(v1) * f64.load(x + (<usize>i32.load(c1) << 3));
      s2 += f64.load(v2) * f64.load(x + (<usize>i32.load(c2) << 3));
      s3 += f64.load(v3) * f64.load(x + (<usize>i32.load(c3) << 3));
      s0 += f64.load(v0, 8) * f64.load(x + (<usize>i32.load(c0, 4) << 3));
      s1 += f64.load(v1, 8) * f64.load(x + (<usize>i32.load(c1, 4) << 3));
      s2 += f64.load(v2, 8) * f64.load(x + (<usize>i32.load(c2, 4) << 3));
      s3 += f64.load(v3, 8) * f64.load(x + (<usize>i32.load(c3, 4) << 3));
      s0 += f64.load(v0, 16) * f64.load(x + (<usize>i32.load(c0, 8) << 3));
      s1 += f64.load(v1, 16) * f64.load(x + (<usize>i32.load(c1, 8) << 3));
      s2 += f64.load(v2, 16) * f64.load(x + (<usize>i32.load(c2, 8) << 3));
      s3 += f64.load(v3, 16) * f64.load(x + (<usize>i32.load(c3, 8) << 3));
      s0 += f64.load(v0, 24) * f64.load(x + (<usize>i32.load(c0, 12) << 3));
      s1 += f64.load(v1, 24) * f64.load(x + (<usize>i32.load(c1, 12) << 3));
      s2 += f64.load(v2, 24) * f64.load(x + (<usize>i32.load(c2, 12) << 3));
      s3 += f64.load(v3, 24) * f64.load(x + (<usize>i32.load(c3, 12) << 3));
      c0 += 16;
      c1 += 16;
      c2 += 16;
      c3 += 16;
      v0 += 32;
      v1 += 32;
      v2 += 32;
      v3 += 32;
    }
    const done = common & ~3;
    f64.store(out, rowRest(s0, k0 + done, e0, columns, values, x));
    f64.store(out, rowRest(s1, k1 + done, e1, columns, values, x), 8);
    f64.store(out, rowRest(s2, k2 + done, e2, columns, values, x), 16);
    f64.store(out, rowRest(s3, k3 + done, e3, columns, values, x), 24);
    rowStart += 16;
    out += 32;
  }
  for (; i < rows; i++) {
    f64.store(out, rowRest(0, i32.load(rowStart), i32.load(rowStart, 4), columns, values, x));
    rowStart += 4;
    out += 8;
  }
}

function rowRest(sum: f64, k: i32, end: i32, columns: usize, values: usize, x: usize): f64 {
  for (; k < end; k++) sum += f64.load(values + (<usize>k << 3)) * f64.load(x + (<usize>i32.load(columns + (<usize>k << 2)) << 3));
  return sum;
}
