/** Weighted sums over eleven entries `step` bytes apart: out = w5 v[0] + w4 (v[-1] + v[1]) + ... , `count` entries side by side, an even number. */
function weighAll(v: usize, out: usize, count: i32, step: usize, weights: usize): void {
  const w0 = v128.load_splat<f64>(weights), w1 = v128.load_splat<f64>(weights, 8), w2 = v128.load_splat<f64>(weights, 16);
  const w3 = v128.load_splat<f64>(weights, 24), w4 = v128.load_splat<f64>(weights, 32), w5 = v128.load_splat<f64>(weights, 40);
  for (let k = 0; k < count; k += 2) {
    let sum = f64x2.add(f64x2.mul(w5, v128.load(v)), f64x2.mul(w4, f64x2.add(v128.load(v - step), v128.load(v + step))));
    sum = f64x2.add(sum, f64x2.mul(w3, f64x2.add(v128.load(v - 2 * step), v128.load(v + 2 * step))));
    sum = f64x2.add(sum, f64x2.mul(w2, f64x2.add(v128.load(v - 3 * step), v128.load(v + 3 * step))));
    sum = f64x2.add(sum, f64x2.mul(w1, f64x2.add(v128.load(v - 4 * step), v128.load(v + 4 * step))));
    v128.store(out, f64x2.add(sum, f64x2.mul(w0, f64x2.add(v128.load(v - 5 * step), v128.load(v + 5 * step)))));
    v += 16;
    out += 16;
  }
}

/**
 * Windowed sums of v, v^2 and v t (see ../metrics/structural-similarity.ts) into `sums`, three images one after another. What
 * lies within five pixels of the rim of the rectangle is not defined.
 * @param weights w0 .. w5
 * @param scratch two images, with five more entries before and after each
 */
export function windowSums(v: usize, t: usize, nx: i32, ny: i32, weights: usize, scratch: usize, sums: usize): void {
  const pixels = nx * ny;
  const even = (pixels + 1) & ~1;
  const image = <usize>pixels << 3;
  const row = <usize>nx << 3;
  const values = scratch + 48;
  const rows = values + image + 112;
  for (let which = 0; which < 3; which++) {
    for (let k: usize = 0; k < image; k += 8) {
      const value = f64.load(v + k);
      f64.store(values + k, which == 0 ? value : which == 1 ? value * value : value * f64.load(t + k));
    }
    weighAll(values, rows, even, 8, weights);
    const inner = (pixels - 10 * nx) & ~1;
    // Where their number is odd, the one that is left out lies in the rim.
    weighAll(rows + 5 * row, sums + 5 * row, inner, row, weights);
    sums += image;
  }
}
