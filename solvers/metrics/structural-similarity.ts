/**
 * SSIM of Wang et al. 2004 with its 11 x 11 Gaussian window of deviation 1.5, population covariance, K1 = 0.01 and K2 = 0.03. Only windows
 * that lie inside the body count; on a full rectangle that leaves the centres in the border of 5 pixels out.
 */
import { exp } from '../core/math';
import type { EvaluationGrid } from '../core/types';
import { scratchOf } from '../kernels/kernel-memory';

const radius = 5;
const width = 2 * radius + 1;
const window = gaussianWindow();

function gaussianWindow(): Float64Array {
  const w = new Float64Array(width);
  let sum = 0;
  for (let i = 0; i < width; i++) sum += w[i] = exp((-(i - radius) * (i - radius)) / (2 * 1.5 * 1.5));
  for (let i = 0; i < width; i++) w[i] /= sum;
  return w;
}

const [w0, w1, w2, w3, w4, w5] = window;

/** What a grid needs, computed once. */
interface Windows {
  /** Pixels whose window lies inside the body, ascending. */
  readonly centres: Int32Array;
  /** Pixels in the column of some window's centre: where sums along rows are needed. */
  readonly strips: Int32Array;
  /** Reused between calls: images on the whole rectangle (0 outside the body) and their sums along rows. */
  readonly scratch: readonly Float64Array[];
}
const cache = new WeakMap<EvaluationGrid, Windows>();

function windowsOf(grid: EvaluationGrid): Windows {
  let windows = cache.get(grid);
  if (windows) return windows;
  const { nx, ny, mask } = grid;
  const across = new Uint8Array(nx * ny);
  for (let row = 0; row < ny; row++)
    for (let column = radius; column < nx - radius; column++) {
      let whole = 1;
      for (let i = -radius; i <= radius; i++) whole &= mask[row * nx + column + i];
      across[row * nx + column] = whole;
    }
  const centres: number[] = [];
  const needed = new Uint8Array(nx * ny);
  for (let row = radius; row < ny - radius; row++)
    for (let column = 0; column < nx; column++) {
      let whole = 1;
      for (let i = -radius; i <= radius; i++) whole &= across[(row + i) * nx + column];
      if (!whole) continue;
      centres.push(row * nx + column);
      for (let i = -radius; i <= radius; i++) needed[(row + i) * nx + column] = 1;
    }
  const strips: number[] = [];
  for (let pixel = 0; pixel < needed.length; pixel++) if (needed[pixel]) strips.push(pixel);
  windows = { centres: Int32Array.from(centres), strips: Int32Array.from(strips), scratch: Array.from({ length: 6 }, () => new Float64Array(nx * ny)) };
  cache.set(grid, windows);
  return windows;
}

/** Sum over the window around `at` in one direction; the window is symmetric: six products. */
function weigh(v: Float64Array, at: number, step: number): number {
  return w5 * v[at] + w4 * (v[at - step] + v[at + step]) + w3 * (v[at - 2 * step] + v[at + 2 * step]) + w2 * (v[at - 3 * step] + v[at + 3 * step])
    + w1 * (v[at - 4 * step] + v[at + 4 * step]) + w0 * (v[at - 5 * step] + v[at + 5 * step]);
}

interface TruthMoments {
  readonly grid: EvaluationGrid;
  /** Sum of the truth's values when they were read: a truth that was changed in place is read anew. */
  readonly sum: number;
  /** At the centres, about the base value. */
  readonly mean: Float64Array;
  readonly variance: Float64Array;
}
/** The truth of a phantom is scored hundreds of times: its moments are kept with it. */
const truthCache = new WeakMap<Float64Array, TruthMoments>();

function truthMoments(truth: Float64Array, grid: EvaluationGrid, windows: Windows, base: number): TruthMoments {
  let sum = 0;
  for (let k = 0; k < truth.length; k++) sum += truth[k];
  const known = truthCache.get(truth);
  if (known && known.grid === grid && known.sum === sum) return known;
  const { centres, strips } = windows;
  const [full, square, , rows, squareRows] = windows.scratch;
  for (let k = 0; k < truth.length; k++) {
    const v = truth[k] - base;
    full[grid.inside[k]] = v;
    square[grid.inside[k]] = v * v;
  }
  for (let i = 0; i < strips.length; i++) {
    rows[strips[i]] = weigh(full, strips[i], 1);
    squareRows[strips[i]] = weigh(square, strips[i], 1);
  }
  const mean = new Float64Array(centres.length);
  const variance = new Float64Array(centres.length);
  for (let k = 0; k < centres.length; k++) {
    mean[k] = weigh(rows, centres[k], grid.nx);
    variance[k] = weigh(squareRows, centres[k], grid.nx) - mean[k] * mean[k];
  }
  const made = { grid, sum, mean, variance };
  truthCache.set(truth, made);
  return made;
}

/** Windowed sums of the estimate about the base value, of its square and of its product with the truth, at the centres. */
interface WindowSums {
  readonly mean: Float64Array;
  readonly square: Float64Array;
  readonly product: Float64Array;
}

function windowSums(truth: Float64Array, estimate: Float64Array, grid: EvaluationGrid, windows: Windows, base: number): WindowSums {
  const { inside, nx, ny } = grid;
  const { centres, strips } = windows;
  const [mean, square, product] = [new Float64Array(centres.length), new Float64Array(centres.length), new Float64Array(centres.length)];
  const pixels = nx * ny;
  const room = scratchOf(8 * pixels, 8 * pixels, 48, 8 * (2 * pixels + 40), 24 * pixels + 16);
  if (room) {
    const [atV, atT, atWeights, scratch, atSums] = room.addresses;
    const v = new Float64Array(room.buffer, atV, pixels).fill(0);
    const t = new Float64Array(room.buffer, atT, pixels).fill(0);
    for (let k = 0; k < inside.length; k++) {
      v[inside[k]] = estimate[k] - base;
      t[inside[k]] = truth[k] - base;
    }
    new Float64Array(room.buffer, atWeights, 6).set(window.subarray(0, 6));
    room.kernels.windowSums(atV, atT, nx, ny, atWeights, scratch, atSums);
    const sums = new Float64Array(room.buffer, atSums, 3 * pixels);
    for (let k = 0; k < centres.length; k++) {
      mean[k] = sums[centres[k]];
      square[k] = sums[pixels + centres[k]];
      product[k] = sums[2 * pixels + centres[k]];
    }
    return { mean, square, product };
  }
  const [full, squares, products, rows, squareRows, productRows] = windows.scratch;
  for (let k = 0; k < inside.length; k++) {
    const at = inside[k];
    const v = estimate[k] - base;
    full[at] = v;
    squares[at] = v * v;
    products[at] = v * (truth[k] - base);
  }
  for (let i = 0; i < strips.length; i++) {
    const at = strips[i];
    rows[at] = weigh(full, at, 1);
    squareRows[at] = weigh(squares, at, 1);
    productRows[at] = weigh(products, at, 1);
  }
  for (let k = 0; k < centres.length; k++) {
    mean[k] = weigh(rows, centres[k], nx);
    square[k] = weigh(squareRows, centres[k], nx);
    product[k] = weigh(productRows, centres[k], nx);
  }
  return { mean, square, product };
}

/**
 * Mean SSIM of two images on `grid.inside`; null where no window fits into the body.
 * Moments are taken about the first pixel of the truth, so that a large background costs no digits.
 * Cost: three separable smoothings of the estimate, five with a new truth.
 * @param range dynamic range L of the truth, > 0
 */
export function structuralSimilarity(truth: Float64Array, estimate: Float64Array, grid: EvaluationGrid, range: number): number | null {
  const windows = windowsOf(grid);
  const { centres } = windows;
  if (centres.length === 0) return null;
  const base = truth[0];
  const t = truthMoments(truth, grid, windows, base);
  const sums = windowSums(truth, estimate, grid, windows, base);
  const c1 = 0.01 * range * (0.01 * range);
  const c2 = 0.03 * range * (0.03 * range);
  let total = 0;
  for (let k = 0; k < centres.length; k++) {
    const mean = sums.mean[k];
    const variance = sums.square[k] - mean * mean;
    const covariance = sums.product[k] - t.mean[k] * mean;
    const a = t.mean[k] + base;
    const b = mean + base;
    total += ((2 * a * b + c1) * (2 * covariance + c2)) / ((a * a + b * b + c1) * (t.variance[k] + variance + c2));
  }
  return total / centres.length;
}
