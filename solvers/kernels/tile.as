// The one inner loop of products, factorisations and solutions: a 4 x 4 tile of sums. Every entry is one sum over the inner
// index in ascending order; the two lanes of a vector are two entries, never two parts of one sum. No fused multiply-add.

/** The tile, row-major: entry (i, j) in lane j of row i. */
export const tile: usize = memory.data(128, 16);

// @ts-ignore: decorator
@inline
export function clearTile(): void {
  const zero = f64x2.splat(0);
  v128.store(tile, zero);
  v128.store(tile, zero, 16);
  v128.store(tile, zero, 32);
  v128.store(tile, zero, 48);
  v128.store(tile, zero, 64);
  v128.store(tile, zero, 80);
  v128.store(tile, zero, 96);
  v128.store(tile, zero, 112);
}

/**
 * tile[i, j] += sum over k < count of a[i, k] b[k, j].
 * @param lane bytes between a[i, k] and a[i + 1, k]
 * @param stepA bytes between a[i, k] and a[i, k + 1]
 * @param stepB bytes between b[k, j] and b[k + 1, j]; b[k, 0 .. 3] lie side by side
 */
// @ts-ignore: decorator
@inline
export function accumulate(a: usize, lane: usize, stepA: usize, b: usize, stepB: usize, count: i32): void {
  let c00 = v128.load(tile), c01 = v128.load(tile, 16);
  let c10 = v128.load(tile, 32), c11 = v128.load(tile, 48);
  let c20 = v128.load(tile, 64), c21 = v128.load(tile, 80);
  let c30 = v128.load(tile, 96), c31 = v128.load(tile, 112);
  for (let k = 0; k < count; k++) {
    const b0 = v128.load(b);
    const b1 = v128.load(b, 16);
    let p = v128.load_splat<f64>(a);
    c00 = f64x2.add(c00, f64x2.mul(p, b0));
    c01 = f64x2.add(c01, f64x2.mul(p, b1));
    p = v128.load_splat<f64>(a + lane);
    c10 = f64x2.add(c10, f64x2.mul(p, b0));
    c11 = f64x2.add(c11, f64x2.mul(p, b1));
    p = v128.load_splat<f64>(a + 2 * lane);
    c20 = f64x2.add(c20, f64x2.mul(p, b0));
    c21 = f64x2.add(c21, f64x2.mul(p, b1));
    p = v128.load_splat<f64>(a + 3 * lane);
    c30 = f64x2.add(c30, f64x2.mul(p, b0));
    c31 = f64x2.add(c31, f64x2.mul(p, b1));
    a += stepA;
    b += stepB;
  }
  v128.store(tile, c00);
  v128.store(tile, c01, 16);
  v128.store(tile, c10, 32);
  v128.store(tile, c11, 48);
  v128.store(tile, c20, 64);
  v128.store(tile, c21, 80);
  v128.store(tile, c30, 96);
  v128.store(tile, c31, 112);
}
