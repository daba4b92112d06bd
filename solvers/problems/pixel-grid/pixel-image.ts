/** Between cells, the evaluation grid and ground truths. */
import { bodyContains } from '../../core/grid';
import type { EvaluationGrid, SparseMatrix } from '../../core/types';
import type { TruthField } from '../../truth/truth-field';
import type { PixelGrid } from './pixel-grid';

/** Overlap of [a, a + step] with each of `count` intervals of `size` from `from`: first index and lengths. */
function overlaps(a: number, step: number, from: number, size: number, count: number): { readonly first: number; readonly lengths: number[] } {
  const first = Math.max(0, Math.min(count - 1, Math.floor((a - from) / size)));
  const lengths: number[] = [];
  for (let k = first; k < count; k++) {
    const low = Math.max(a, from + k * size);
    const high = Math.min(a + step, from + (k + 1) * size);
    if (k > first && !(high > low)) break;
    lengths.push(Math.max(0, high - low));
  }
  return { first, lengths };
}

/**
 * Averages of the cells over the pixels of `image.inside`: row p holds the share of each unknown in pixel p by area, over what unknowns
 * cover of it. Rows sum to 1 up to rounding.
 * @throws RangeError where a pixel inside the body meets no unknown
 */
export function pixelShares(grid: PixelGrid, image: EvaluationGrid): SparseMatrix {
  const stepX = (image.xMax - image.xMin) / image.nx;
  const stepY = (image.yMax - image.yMin) / image.ny;
  const across = Array.from({ length: image.nx }, (_, j) => overlaps(image.xMin + j * stepX, stepX, grid.xMin, grid.dx, grid.nx));
  const up = Array.from({ length: image.ny }, (_, i) => overlaps(image.yMin + i * stepY, stepY, grid.yMin, grid.dy, grid.ny));
  const rowStart = new Int32Array(image.inside.length + 1);
  const columns: number[] = [];
  const values: number[] = [];
  for (let p = 0; p < image.inside.length; p++) {
    const x = across[image.inside[p] % image.nx];
    const y = up[Math.floor(image.inside[p] / image.nx)];
    const start = columns.length;
    let covered = 0;
    for (let a = 0; a < y.lengths.length; a++)
      for (let b = 0; b < x.lengths.length; b++) {
        const area = y.lengths[a] * x.lengths[b];
        const unknown = grid.numberOf[(y.first + a) * grid.nx + x.first + b];
        // What rounding leaves of a shared edge is no share.
        if (unknown < 0 || !(area > 1e-12 * stepX * stepY)) continue;
        covered += area;
        columns.push(unknown);
        values.push(area);
      }
    if (!(covered > 0)) throw new RangeError(`Pixel ${image.inside[p]} of the image lies outside the cells.`);
    for (let k = start; k < values.length; k++) values[k] /= covered;
    rowStart[p + 1] = columns.length;
  }
  return { rows: image.inside.length, cols: grid.inside.length, rowStart, columns: Int32Array.from(columns), values: Float64Array.from(values) };
}

/** Samples a side in each cell. */
const samples = 16;

/**
 * Averages of a ground truth over each cell, clipped to the body (midpoint rule, 16 x 16; along an interval 256 in a row).
 * @throws RangeError naming the place where an expression has no admissible value
 */
export function projectOnPixels(truth: TruthField, grid: PixelGrid): Float64Array {
  const { nx, dx, dy, xMin, yMin, inside, body } = grid;
  const contains = bodyContains(body);
  const centreX = (xMin + grid.xMax) / 2;
  const centreY = (yMin + grid.yMax) / 2;
  const line = body.kind === 'interval';
  const acrossCount = line ? samples * samples : samples;
  const upCount = line ? 1 : samples;
  const out = new Float64Array(inside.length);
  for (let c = 0; c < inside.length; c++) {
    const x0 = xMin + (inside[c] % nx) * dx;
    const y0 = yMin + Math.floor(inside[c] / nx) * dy;
    let sum = 0;
    let count = 0;
    for (let a = 0; a < upCount; a++) {
      const y = y0 + ((a + 0.5) / upCount) * dy;
      for (let b = 0; b < acrossCount; b++) {
        const x = x0 + ((b + 0.5) / acrossCount) * dx;
        if (!contains(x - centreX, y - centreY)) continue;
        sum += truth.valueAt(x, y);
        count++;
      }
    }
    // A sliver of the body between the samples has the value at its point nearest to the middle.
    out[c] = count > 0 ? sum / count : truth.valueAt(nearest(centreX, x0, dx), nearest(centreY, y0, dy));
  }
  return out;
}

const nearest = (to: number, from: number, length: number): number => Math.max(from, Math.min(from + length, to));
