import { Matrix, SingularValueDecomposition } from 'ml-matrix';
import { transpose } from './matrix-product';
import { applyReflections, reflectRows } from './row-reflections';

export interface ThinSvd {
  /** Left singular vectors as columns, rows x r row-major. */
  readonly u: Float64Array;
  /** Singular values, descending, length r. */
  readonly s: Float64Array;
  /** Right singular vectors as columns, cols x r row-major. */
  readonly v: Float64Array;
}

/**
 * A = U diag(s) V^T, thin, of rank r at most min(rows, cols): directions whose singular values are rounding errors
 * (below about max(rows, cols) times the unit roundoff of the largest) are left out.
 *
 * Two orthogonal reductions, rows by pivoting and then columns (Chan 1982; Businger and Golub 1965), leave an r x r matrix
 * for the Golub-Reinsch algorithm; all steps are backward stable, so singular values are within a small multiple of
 * eps s_1. Cost about 4 rows cols r operations and 20 r^3.
 * @param values rows x cols, row-major, not changed
 * @throws RangeError when the length is not rows x cols, or a value is not finite
 */
export function thinSvd(values: Float64Array, rows: number, cols: number): ThinSvd {
  if (values.length !== rows * cols) throw new RangeError(`The matrix has ${values.length} values, not ${rows} x ${cols}.`);
  let largest = 0;
  for (let k = 0; k < values.length; k++) {
    const size = Math.abs(values[k]);
    if (!(size < Infinity)) throw new RangeError(`Entry ${k} of the matrix is not finite.`);
    if (size > largest) largest = size;
  }
  if (largest === 0) return { u: new Float64Array(0), s: new Float64Array(0), v: new Float64Array(0) };
  if (rows > cols) {
    const swapped = thinSvd(transpose(values, rows, cols), cols, rows);
    return { u: swapped.v, s: swapped.s, v: swapped.u };
  }
  // A power of two scales exactly and keeps the squared norms inside the range of doubles.
  let scale = 1;
  while (largest * scale >= 2) scale /= 2;
  while (largest * scale < 1) scale *= 2;
  const work = new Float64Array(values.length);
  for (let k = 0; k < work.length; k++) work[k] = values[k] * scale;
  const byRows = reflectRows(work, rows, cols, Number.EPSILON * Math.sqrt(cols));
  const r = byRows.rank;
  const byColumns = reflectRows(transpose(byRows.lower, rows, r), r, rows, 0);
  // A[pivots] = lower Q^T and lower^T[pivots'] = core Q'^T, so A[pivots] = Q' core^T (pivots' applied to Q's coordinates).
  const rank = byColumns.rank;
  const core = new Matrix(rank, r);
  for (let i = 0; i < r; i++) for (let k = 0; k < rank; k++) core.set(k, byColumns.pivots[i], byColumns.lower[i * rank + k]);
  const svd = new SingularValueDecomposition(core, { autoTranspose: true });
  const left = svd.leftSingularVectors;
  const right = svd.rightSingularVectors;
  const uRows = new Float64Array(rank * rows);
  for (let j = 0; j < rank; j++) for (let k = 0; k < rank; k++) uRows[j * rows + k] = left.get(k, j);
  applyReflections(byColumns, uRows, rank);
  const vRows = new Float64Array(rank * cols);
  for (let j = 0; j < rank; j++) for (let k = 0; k < r; k++) vRows[j * cols + k] = right.get(k, j);
  applyReflections(byRows, vRows, rank);
  const u = new Float64Array(rows * rank);
  for (let i = 0; i < rows; i++) for (let j = 0; j < rank; j++) u[byRows.pivots[i] * rank + j] = uRows[j * rows + i];
  const s = new Float64Array(rank);
  for (let j = 0; j < rank; j++) s[j] = svd.diagonal[j] / scale;
  return { u, s, v: transpose(vRows, rank, cols) };
}
