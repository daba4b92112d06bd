import type { DeblurringGeometry } from '../../../shared/domain/geometry/deblurring';
import { evaluationGrid } from '../../core/grid';
import type { EvaluationGrid } from '../../core/types';
import type { TruthField } from '../../truth/truth-field';
import { pictureGrid } from './picture';

/** Points a side in a sample that an outline crosses. */
const side = 16;
/** Change within a sample, over the range of the whole picture, up to which four points do. */
const spread = 0.02;

/**
 * Averages of the truth over the pixels of a fine grid. Where the corners of a pixel differ it is averaged over 256 points, sheared so that
 * no two share a row or column: an upright or level edge is then placed to 1/512 of a pixel. What is smaller than a pixel and misses its
 * corners is not seen.
 */
export function sampleTruth(truth: TruthField, grid: EvaluationGrid): Float64Array {
  const { nx, ny, xMin, yMin } = grid;
  const stepX = (grid.xMax - xMin) / nx;
  const stepY = (grid.yMax - yMin) / ny;
  const corners = new Float64Array((nx + 1) * (ny + 1));
  for (let i = 0; i <= ny; i++) for (let j = 0; j <= nx; j++) corners[i * (nx + 1) + j] = truth.valueAt(xMin + j * stepX, yMin + i * stepY);
  let lowest = Infinity;
  let highest = -Infinity;
  for (const value of corners) {
    lowest = Math.min(lowest, value);
    highest = Math.max(highest, value);
  }
  const out = new Float64Array(nx * ny);
  for (let i = 0; i < ny; i++)
    for (let j = 0; j < nx; j++) {
      const at = i * (nx + 1) + j;
      const a = corners[at];
      const b = corners[at + 1];
      const c = corners[at + nx + 1];
      const d = corners[at + nx + 2];
      if (truth.piecewiseConstant && a === b && a === c && a === d) {
        out[i * nx + j] = a;
        continue;
      }
      const change = Math.max(a, b, c, d) - Math.min(a, b, c, d);
      const smooth = !truth.piecewiseConstant && change <= spread * (highest - lowest);
      out[i * nx + j] = average(truth, xMin + j * stepX, yMin + i * stepY, stepX, stepY, smooth ? 2 : side);
    }
  return out;
}

/** Over n x n points of a rectangle: point (p, q) lies in cell (p, q), moved in it along x by p and along y by q. */
function average(truth: TruthField, x0: number, y0: number, dx: number, dy: number, n: number): number {
  let sum = 0;
  for (let p = 0; p < n; p++)
    for (let q = 0; q < n; q++) sum += truth.valueAt(x0 + ((q + (p + 0.5) / n) / n) * dx, y0 + ((p + (q + 0.5) / n) / n) * dy);
  return sum / (n * n);
}

/** Parts a side of each pixel in a projection: what a blur leaves of the error of an average is then below the noise. */
const parts = 8;

/** Averages of the truth over the picture's pixels. */
export function projectOnPicture(truth: TruthField, geometry: Pick<DeblurringGeometry, 'body' | 'cells'>): Float64Array {
  const { nx, ny, xMin, xMax, yMin, yMax, body } = pictureGrid(geometry);
  const fine = sampleTruth(truth, evaluationGrid({ nx: nx * parts, ny: ny * parts, xMin, xMax, yMin, yMax, body }));
  const out = new Float64Array(nx * ny);
  for (let i = 0; i < ny * parts; i++) for (let j = 0; j < nx * parts; j++) out[Math.floor(i / parts) * nx + Math.floor(j / parts)] += fine[i * nx * parts + j];
  return out.map((sum) => sum / (parts * parts));
}
