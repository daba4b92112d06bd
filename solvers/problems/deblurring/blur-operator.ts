import type { DeblurringGeometry } from '../../../shared/domain/geometry/deblurring';
import { applySparse, applySparseTransposed } from '../../core/sparse';
import type { Derivative, SparseMatrix } from '../../core/types';
import { edgeIndex } from './edges';
import { sampledGaussian } from './gaussian-spread';
import { pictureOf } from './picture';
import { pointSpreadOf } from './point-spread';

/** Entries of a sparse matrix, at most: 48 MB. */
const mostEntries = 4_000_000;

/**
 * The blur of the inversion on the picture's pixels: the point-spread function on pixels with what `edge` puts beyond the picture. A
 * Gaussian acts along rows, then columns. The sparse matrix is there where it is affordable; adjoints are exact transposes.
 */
export function blurOperator(geometry: DeblurringGeometry): Derivative {
  const { nx, ny, dx, dy } = pictureOf(geometry);
  const taps = pointSpreadOf(geometry).taps(dx, dy);
  const n = nx * ny;
  const indexX = indexTable(geometry, taps.columns, nx);
  const indexY = indexTable(geometry, taps.rows, ny);
  const sparse = n * Math.min(n, taps.values.length) <= mostEntries ? sparseBlur(taps.values, indexX, indexY, nx, ny) : undefined;
  if (geometry.pointSpread === 'gaussian') {
    const along = bandMatrix(geometry, sampledGaussian(geometry.spread, dx), nx);
    const up = bandMatrix(geometry, sampledGaussian(geometry.spread, dy), ny);
    return { rows: n, cols: n, ...(sparse ? { sparse } : {}), ...separableAction(along, up, nx, ny) };
  }
  if (sparse) return { rows: n, cols: n, sparse, apply: (x, out) => applySparse(sparse, x, out), applyAdjoint: (y, out) => applySparseTransposed(sparse, y, out) };
  return { rows: n, cols: n, ...tapAction(taps.values, indexX, indexY, nx, ny) };
}

/** Source pixel of tap k for pixel i of a row of n: entry k * n + i. */
function indexTable({ edge }: DeblurringGeometry, offsets: Int32Array, n: number): Int32Array {
  const table = new Int32Array(offsets.length * n);
  for (let k = 0; k < offsets.length; k++) for (let i = 0; i < n; i++) table[k * n + i] = edgeIndex(edge, i + offsets[k], n);
  return table;
}

function sparseBlur(values: Float64Array, indexX: Int32Array, indexY: Int32Array, nx: number, ny: number): SparseMatrix {
  const n = nx * ny;
  const rowStart = new Int32Array(n + 1);
  const columns = new Int32Array(n * Math.min(n, values.length));
  const entries = new Float64Array(columns.length);
  let filled = 0;
  const sum = new Float64Array(n);
  const mark = new Int32Array(n).fill(-1);
  for (let i = 0; i < ny; i++)
    for (let j = 0; j < nx; j++) {
      const row = i * nx + j;
      const found: number[] = [];
      let ascending = true;
      for (let k = 0; k < values.length; k++) {
        const a = indexY[k * ny + i];
        const b = indexX[k * nx + j];
        if (a < 0 || b < 0) continue;
        const column = a * nx + b;
        if (mark[column] !== row) {
          mark[column] = row;
          sum[column] = 0;
          ascending &&= found.length === 0 || column > found[found.length - 1];
          found.push(column);
        }
        sum[column] += values[k];
      }
      if (!ascending) found.sort((p, q) => p - q);
      for (const column of found) {
        columns[filled] = column;
        entries[filled++] = sum[column];
      }
      rowStart[row + 1] = filled;
    }
  return { rows: n, cols: n, rowStart, columns: columns.slice(0, filled), values: entries.slice(0, filled) };
}

/** n x n matrix of a blur along a line, row-major. */
function bandMatrix({ edge }: DeblurringGeometry, weights: Float64Array, n: number): Float64Array {
  const reach = (weights.length - 1) / 2;
  const matrix = new Float64Array(n * n);
  for (let i = 0; i < n; i++)
    for (let k = -reach; k <= reach; k++) {
      const column = edgeIndex(edge, i + k, n);
      if (column >= 0) matrix[i * n + column] += weights[k + reach];
    }
  return matrix;
}

type Action = Pick<Derivative, 'apply' | 'applyAdjoint'>;

function requireLength(x: Float64Array, out: Float64Array, n: number): void {
  if (x.length !== n || out.length !== n) throw new RangeError(`Lengths ${x.length} and ${out.length} do not fit a blur of ${n} pixels.`);
}

/** out = U X A^T for an image X of ny rows by nx columns. */
function twoSided(along: Float64Array, up: Float64Array, nx: number, ny: number, x: Float64Array, scratch: Float64Array, out: Float64Array): void {
  for (let i = 0; i < ny; i++)
    for (let j = 0; j < nx; j++) {
      let sum = 0;
      for (let k = 0; k < nx; k++) sum += along[j * nx + k] * x[i * nx + k];
      scratch[i * nx + j] = sum;
    }
  out.fill(0);
  for (let i = 0; i < ny; i++)
    for (let k = 0; k < ny; k++) {
      const weight = up[i * ny + k];
      if (weight === 0) continue;
      for (let j = 0; j < nx; j++) out[i * nx + j] += weight * scratch[k * nx + j];
    }
}

function transposed(a: Float64Array, n: number): Float64Array {
  const out = new Float64Array(n * n);
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) out[j * n + i] = a[i * n + j];
  return out;
}

function separableAction(along: Float64Array, up: Float64Array, nx: number, ny: number): Action {
  const alongT = transposed(along, nx);
  const upT = transposed(up, ny);
  const scratch = new Float64Array(nx * ny);
  return {
    apply(x, out) {
      requireLength(x, out, nx * ny);
      twoSided(along, up, nx, ny, x, scratch, out);
    },
    applyAdjoint(y, out) {
      requireLength(y, out, nx * ny);
      twoSided(alongT, upT, nx, ny, y, scratch, out);
    },
  };
}

function tapAction(values: Float64Array, indexX: Int32Array, indexY: Int32Array, nx: number, ny: number): Action {
  const walk = (visit: (k: number, pixel: number, source: number) => void): void => {
    for (let k = 0; k < values.length; k++)
      for (let i = 0; i < ny; i++) {
        const a = indexY[k * ny + i];
        if (a < 0) continue;
        for (let j = 0; j < nx; j++) {
          const b = indexX[k * nx + j];
          if (b >= 0) visit(k, i * nx + j, a * nx + b);
        }
      }
  };
  return {
    apply(x, out) {
      requireLength(x, out, nx * ny);
      out.fill(0);
      walk((k, pixel, source) => {
        out[pixel] += values[k] * x[source];
      });
    },
    applyAdjoint(y, out) {
      requireLength(y, out, nx * ny);
      out.fill(0);
      walk((k, pixel, source) => {
        out[source] += values[k] * y[pixel];
      });
    },
  };
}
